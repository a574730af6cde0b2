import { readdirSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readBlock } from '#shared/page-source/read-block'
import { CircuitFigures } from '#shared/stage/circuit-figures'
import { defaultValues, selfCheck, stageResponse, vectorOf } from '#shared/stage/index'
import { readCheck } from '../../support/circuits'
import { evaluated, HOUSE_BLOCKS, seedPage, stageOf } from '../../support/stages'

/** Results of a block by the name that the check file gives the same figure. */
const CLOSED_FORM: Record<string, Record<string, string>> = {
  'lp1-inv': { f_c: 'f_c', K: 'K' },
  'hp1-inv': { f_c: 'f_c', K: 'K' },
  'bp1-wide': { f_1: 'f_3dB_low', f_2: 'f_3dB_high', K_0: 'K_peak', f_0: 'f_0', Q: 'Q' },
  'lp1-ni': { f_c: 'f_c', K: 'K' },
  'lp2-sku': { f_0: 'f_0', Q: 'Q', K: 'K', f_c: 'f_3dB' },
  'lp2-mfb': { f_0: 'f_0', Q: 'Q', K: 'K', f_c: 'f_3dB' },
}
const MEASURED: Record<string, Record<string, string>> = {
  'lp1-inv': { f_c: 'f_3dB' },
  'hp1-inv': { f_c: 'f_3dB' },
  'bp1-wide': { f_1: 'f_3dB_low', f_2: 'f_3dB_high', K_0: 'peak_gain' },
  'lp1-ni': { f_c: 'f_3dB' },
  'lp2-sku': { f_c: 'f_3dB' },
  'lp2-mfb': { f_c: 'f_3dB' },
}

describe('the first shelf', () => {
  const codes = readdirSync(new URL('../../../content-seed/', import.meta.url))
    .filter((name) => name.endsWith('.md'))
    .map((name) => name.slice(0, -3))

  it('has the blocks that are checked here', () => {
    expect(codes).toEqual(expect.arrayContaining(HOUSE_BLOCKS.map(([code]) => code)))
  })

  it.each(codes)('reads %s without a problem, and its formulas agree with its circuit', (code) => {
    const reading = readBlock(seedPage(code))
    expect(reading.ok ? [] : reading.problems).toEqual([])
    if (!reading.ok) return
    expect(reading.value.page.metadata.code).toBe(code)
    const { stage } = reading.value
    const check = selfCheck(stage, defaultValues(stage))
    expect(check.lines.filter((line) => line.outcome !== 'agrees')).toEqual([])
    expect(check.outcome).toBe('agrees')
    expect(check.worstRelativeDifference).toBeLessThan(1e-6)
  })

  it.each(codes)('keeps the defaults of %s inside its limits and its stock', (code) => {
    const { limits, parts } = evaluated(stageOf(code), {})
    expect(limits).toEqual([])
    expect(Object.entries(parts).filter(([, part]) => !part.inStock)).toEqual([])
  })
})

// Source: the header of each file of tests/checks/circuits (ngspice .ac with an ideal op-amp; closed forms of
// Van Valkenburg 1982, Sallen & Key 1955, Huelsman & Allen 1980); tolerances as the headers state them.
describe.each(HOUSE_BLOCKS)('%s at the values of the check circuit %s', (code, file) => {
  const check = readCheck(file)
  const stage = stageOf(code)

  it('takes exactly its parts', () => {
    expect(stage.parts.map((part) => part.name).sort()).toEqual(Object.keys(check.parts).sort())
  })

  it('has its response at all 61 points within 1e-6·|H| + 1e-8·max|H|', () => {
    const { frequency_Hz, out } = check.response as unknown as {
      frequency_Hz: number[]
      out: { ideal: { re: number[]; im: number[] } }
    }
    expect(frequency_Hz).toHaveLength(61)
    const { re, im } = stageResponse(stage, check.parts, {}, stage.outputs[0]!, frequency_Hz)
    const sizes = out.ideal.re.map((x, k) => Math.hypot(x, out.ideal.im[k]!))
    const most = Math.max(...sizes)
    const strain = sizes.map(
      (size, k) => Math.hypot(re[k]! - out.ideal.re[k]!, im[k]! - out.ideal.im[k]!) / (1e-6 * size + 1e-8 * most),
    )
    expect(Math.max(...strain)).toBeLessThanOrEqual(1)
  })

  it('computes its closed-form figures to 1e-9', () => {
    const { results } = evaluated(stage, { values: check.parts })
    for (const [name, figure] of Object.entries(CLOSED_FORM[code]!))
      expect(results[name]!.value, name).toAgreeWith(check.figures[figure]!, { relative: 1e-9 })
  })

  it('finds on the drawn circuit the figures measured on the curve, to 1e-6', () => {
    const figures = new CircuitFigures(stage, check.parts, {})
    const env = vectorOf(stage, check.parts)
    for (const [name, measured] of Object.entries(MEASURED[code]!)) {
      const result = stage.results.find((one) => one.name === name)!
      const wanted = check.measured['out']!.ideal[measured]!
      expect(Math.abs(figures.find(result, env)), name).toAgreeWith(wanted, { relative: 1e-6 })
    }
  })

  it('agrees with itself there too', () => {
    expect(selfCheck(stage, check.parts).outcome).toBe('agrees')
  })
})
