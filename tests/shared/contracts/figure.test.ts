import { describe, expect, it } from 'vitest'
import { ResponseVector, ResultOutcome } from '#shared/contracts/compute'

describe('a figure that the circuit does not have', () => {
  it('is null in JSON and NaN again when it is read', () => {
    const written = JSON.stringify(ResultOutcome.parse({ value: NaN, unit: 'Hz' }))
    expect(written).toBe('{"value":null,"unit":"Hz"}')
    expect(ResultOutcome.parse(JSON.parse(written))).toEqual({ value: NaN, unit: 'Hz' })
  })

  it('keeps figures that there are to the last digit', () => {
    const value = 0.1 + 0.2
    expect(ResultOutcome.parse(JSON.parse(JSON.stringify({ value, unit: '' })))).toEqual({ value, unit: '' })
  })

  it('takes no text for a figure', () => {
    expect(ResultOutcome.safeParse({ value: '1', unit: '' }).success).toBe(false)
    expect(ResponseVector.safeParse({ output: 'out', frequenciesHz: [1], re: ['1'], im: [0] }).success).toBe(false)
  })
})
