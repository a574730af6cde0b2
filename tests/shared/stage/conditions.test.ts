import { describe, expect, it } from 'vitest'
import { evaluated, stageOf, worstErrorOf } from '../../support/stages'

const inverting = stageOf('lp1-inv')
const values = { Ri: 10e3, Rf: 100e3, Cf: 1.5e-9 }

describe('a source resistance', () => {
  it('adds to Ri of the inverting low-pass: K is −Rf/(Ri + Rs), and that is held against the target', () => {
    const { results } = evaluated(inverting, { values, targets: { K: -10, f_c: 1000 }, conditions: { sourceOhm: 600 } })
    // Superposition at the virtual ground. Textbook.
    expect(results['K']!.value).toAgreeWith(-10, { relative: 1e-12 })
    expect(results['K']!.underConditions).toAgreeWith(-100 / 10.6, { relative: 1e-9 })
    expect(results['K']!.relativeError).toAgreeWith(1 - 10 / 10.6, { relative: 1e-9 })
    expect(results['Z_in']!.underConditions).toBeUndefined()
    // The corner is set by Rf and Cf alone.
    expect(results['f_c']!.underConditions).toBeUndefined()
    expect(results['f_c']!.relativeError).toAgreeWith(1 / (2 * Math.PI * 100e3 * 1.5e-9) / 1000 - 1, { relative: 1e-9 })
  })

  it('stands beside the ideal figure above 0.1 % only', () => {
    const under = (sourceOhm: number) =>
      evaluated(inverting, { values, conditions: { sourceOhm } }).results['K']!.underConditions
    expect(under(0)).toBeUndefined()
    expect(under(9.9)).toBeUndefined()
    expect(under(10.2)).toAgreeWith(-100e3 / 10010.2, { relative: 1e-9 })
  })

  it('moves the corner of a passive input: 1/(2π(R1 + Rs)C1)', () => {
    const { results } = evaluated(stageOf('lp1-ni'), {
      values: { R1: 16e3, C1: 10e-9 },
      targets: { f_c: 1000 },
      conditions: { sourceOhm: 1000 },
    })
    const corner = 1 / (2 * Math.PI * 17e3 * 10e-9)
    expect(results['f_c']!.underConditions).toAgreeWith(corner, { relative: 1e-9 })
    expect(results['f_c']!.relativeError).toAgreeWith(corner / 1000 - 1, { relative: 1e-6 })
  })

  it('is no load, and a load on an ideal amplifier changes nothing', () => {
    const { results } = evaluated(inverting, { values, conditions: { loadOhm: 600, loadFarad: 1e-9 } })
    for (const result of Object.values(results)) expect(result.underConditions).toBeUndefined()
  })

  it('does not change what the formulas give, nor the limits', () => {
    const ideal = evaluated(inverting, { values })
    const loaded = evaluated(inverting, { values, conditions: { sourceOhm: 600 } })
    for (const name of ['f_c', 'K', 'Z_in']) expect(loaded.results[name]!.value).toBe(ideal.results[name]!.value)
    expect(loaded.limits).toEqual(ideal.limits)
  })
})

describe('sizing under a source resistance', () => {
  it('makes up for it: Ri and the source together give the gain', () => {
    const { results, values } = evaluated(inverting, { targets: { f_c: 2400, K: -2 }, conditions: { sourceOhm: 1000 } })
    expect(values['Rf']! / (values['Ri']! + 1000)).toBeCloseTo(2, 1)
    expect(Math.abs(results['K']!.relativeError!)).toBeLessThan(0.005)
    expect(Math.abs(results['f_c']!.relativeError!)).toBeLessThan(0.005)
    expect(results['K']!.target).toBe(-2)
  })

  it('makes up for it where it moves the corner', () => {
    const { results } = evaluated(stageOf('lp1-ni'), { targets: { f_c: 1000, K: 4 }, conditions: { sourceOhm: 2200 } })
    // Half a step of E96. IEC 60063.
    expect(Math.abs(results['f_c']!.relativeError!)).toBeLessThan(0.013)
    expect(results['f_c']!.underConditions).toBeDefined()
  })

  it('keeps held parts, and shows the error that is left', () => {
    const { results, values: fitted } = evaluated(inverting, {
      values: { Ri: 10e3, Rf: 20e3 },
      targets: { K: -2 },
      conditions: { sourceOhm: 1000 },
    })
    expect([fitted['Ri'], fitted['Rf']]).toEqual([10e3, 20e3])
    expect(results['K']!.relativeError).toBeCloseTo(1 - 10 / 11, 9)
  })

  it('of the multiple-feedback low-pass comes within two per cent of all three targets', () => {
    const stage = stageOf('lp2-mfb')
    const targets = { f_0: 1800, Q: 0.9, K: -2 }
    const conditions = { sourceOhm: 600 }
    const ideal = evaluated(stage, { targets })
    // The parts sized for an ideal source are 4.2 % off with this one.
    expect(worstErrorOf(evaluated(stage, { values: ideal.values, targets, conditions }))).toBeGreaterThan(0.04)
    expect(worstErrorOf(evaluated(stage, { targets, conditions }))).toBeLessThan(0.02)
  })
})

describe('conditions that are only carried', () => {
  it('change no figure', () => {
    const { results } = evaluated(inverting, {
      values,
      conditions: { supplyPlusVolt: 5, supplyMinusVolt: -5, temperatureKelvin: 350, levelVoltPeak: 1 },
    })
    expect(results).toEqual(evaluated(inverting, { values }).results)
  })
})
