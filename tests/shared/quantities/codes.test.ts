import { describe, expect, it } from 'vitest'
import checks from '../../checks/rkm-codes.json'
import { readQuantity } from '#shared/quantities/read'
import type { Unit } from '#shared/quantities/unit'

// Source: IEC 60062:2016 (codes), SI brochure prefixes (free forms), lists of refused and ambiguous entries made for
// the check; see the header of tests/checks/rkm-codes.json.
const UNIT: Record<string, Unit> = { ohm: 'Ω', farad: 'F', hertz: 'Hz' }

describe('values as they are typed', () => {
  it.each([...checks.codes, ...checks.freeform])('reads $text as $kind $value', ({ text, kind, value }) => {
    const reading = readQuantity(text, UNIT[kind]!)
    expect(reading.ok && reading.value).toAgreeWith(value, { relative: 1e-15 })
  })

  it.each(checks.ambiguous)('reads or refuses $text as the list allows', ({ text, kind, acceptable, never }) => {
    const reading = readQuantity(text, UNIT[kind]!)
    const outcome = reading.ok ? reading.value : 'refuse'
    expect(acceptable).toContain(outcome)
    expect(never).not.toContain(outcome)
  })

  it.each(checks.malformed)('refuses $text ($why) with a sentence', ({ text, kind }) => {
    const reading = readQuantity(text, UNIT[kind]!)
    expect(reading.ok).toBe(false)
    if (!reading.ok) expect(reading.problems[0].detail).toMatch(/^.{10,}\.$/s)
  })
})
