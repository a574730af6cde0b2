import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { prepareCircuit } from '#shared/analysis/nodal-analysis'
import type { RationalTransferFunction } from '#shared/analysis/rational'
import { rationalTransferFunction } from '#shared/analysis/rational'
import { impulseResponse, impulseWeight, stepFigures, stepResponse } from '#shared/analysis/step'
import type { Complex } from '#shared/numerics/complex'
import { netlistOf, netlistOfCheck, valuesOf } from '../../support/circuits'

interface StepCheck {
  circuit: string
  output: string
  parts: Record<string, number>
  value_at_0plus: number
  final_value: number
  extreme_value: number
  time_of_extreme_s: number
  rise_time_10_90_s?: number
  overshoot?: number
  time_s: number[]
  y_V: number[]
}

const STEPS = [
  'lp1-inverting',
  'hp1-inverting',
  'lp2-mfb',
  'lp2-sallen-key-unity',
  'bp2-mfb',
  'biquad-tow-thomas-lp',
] as const

const readStep = (name: string) =>
  JSON.parse(readFileSync(new URL(`../../checks/steps/${name}.json`, import.meta.url), 'utf8')) as StepCheck

// Source: scipy.signal.step on the closed form, held against residues and ngspice `.tran`, as each file's header says.
describe.each(STEPS)('%s', (name) => {
  const check = readStep(name)
  const h = rationalTransferFunction(prepareCircuit(netlistOfCheck(check.circuit)), check.parts, check.output)
  const most = Math.max(...check.y_V.map(Math.abs))

  it('gives the step response', () => {
    expect(stepResponse(h, check.time_s)).toAgreeWith(check.y_V, { absolute: 1e-6 * most })
  })

  it('gives its figures', () => {
    const figures = stepFigures(h)
    expect(figures.startVolt).toAgreeWith(check.value_at_0plus, { absolute: 1e-9 })
    expect(figures.finalVolt).toAgreeWith(check.final_value, { absolute: 1e-9 })
    if (check.rise_time_10_90_s === undefined) expect(figures.riseTimeSec).toBeNull()
    else expect(figures.riseTimeSec).toAgreeWith(check.rise_time_10_90_s, { relative: 1e-5 })
    if (check.overshoot === undefined) expect(figures.overshoot).toBeNull()
    else expect(figures.overshoot).toAgreeWith(check.overshoot, { absolute: 1e-5 })
    if (figures.extreme!.timeSec === Infinity) {
      // The file holds the end of its time axis, where the response has come within 1e-3 of its limit.
      expect(figures.extreme!.volt).toBe(figures.finalVolt)
      expect(check.extreme_value).toAgreeWith(check.final_value, { relative: 1e-3 })
    } else {
      expect(figures.extreme!.volt).toAgreeWith(check.extreme_value, { absolute: 1e-6 * most })
      expect(figures.extreme!.timeSec).toAgreeWith(check.time_of_extreme_s, { relative: 1e-3 })
    }
  })
})

const rational = (poles: Complex[], zeros: Complex[] = [], gain = 1): RationalTransferFunction => ({
  poles,
  zeros,
  gain,
  numerator: [],
  denominator: [],
})
const real = (...values: number[]) => values.map((re) => ({ re, im: 0 }))
const TIMES = [0.001, 0.03, 0.3, 1, 2, 5, 10, 20, 40]

// Source: inverse Laplace transforms of the textbooks, t^(n−1)·e^{−at}/(n−1)! and its integral (from memory).
describe('repeated poles', () => {
  it.each([1, 2, 3, 5, 8])('give the gamma distribution for order %i', (order) => {
    const h = rational(real(...Array.from({ length: order }, () => -1)))
    const factorial = (n: number): number => (n < 2 ? 1 : n * factorial(n - 1))
    const impulse = TIMES.map((t) => (t ** (order - 1) * Math.exp(-t)) / factorial(order - 1))
    expect(impulseResponse(h, TIMES)).toAgreeWith(impulse, { relative: 1e-12, absolute: 1e-18 })
    const step = TIMES.map((t) => {
      let missing = 0
      for (let k = 0; k < order; k++) missing += (t ** k * Math.exp(-t)) / factorial(k)
      return 1 - missing
    })
    expect(stepResponse(h, TIMES)).toAgreeWith(step, { absolute: 1e-13 })
  })

  it('give t·sin(t)/2 as a repeated pair on the axis', () => {
    const pair = [
      { re: 0, im: 1 },
      { re: 0, im: -1 },
    ]
    const h = rational([...pair, ...pair], real(0))
    expect(impulseResponse(h, TIMES)).toAgreeWith(
      TIMES.map((t) => (t * Math.sin(t)) / 2),
      { absolute: 1e-12 },
    )
    expect(stepFigures(h)).toMatchObject({ finalVolt: null, extreme: null, riseTimeSec: null, overshoot: null })
  })

  it.each([1e-3, 1e-5, 1e-8, 1e-12, 1e-15])('give the same as poles %d apart', (gap) => {
    const apart = stepResponse(rational(real(-1, -1 - gap, -1 - 2 * gap)), TIMES)
    // Poles spread about one mean differ from copies of it in the square of the gap alone.
    const copies = stepResponse(rational(real(-1 - gap, -1 - gap, -1 - gap)), TIMES)
    expect(apart).toAgreeWith(copies, { absolute: 1e-13 + gap * gap })
  })

  it('give ramps as an integrator', () => {
    expect(stepResponse(rational(real(0), [], -2), TIMES)).toAgreeWith(
      TIMES.map((t) => -2 * t),
      { relative: 1e-14 },
    )
    expect(stepResponse(rational(real(0, 0)), TIMES)).toAgreeWith(
      TIMES.map((t) => (t * t) / 2),
      { relative: 1e-14 },
    )
  })
})

describe('poles many decades apart', () => {
  it('keep the slow and the fast part', () => {
    const h = rational(real(-1e-3, -1e9), [], 1e6)
    const times = [1e-10, 1e-9, 1e-3, 1, 1e3, 1e4]
    const [slow, fast] = [1e-3, 1e9]
    const wanted = times.map((t) => 1 + (slow * Math.exp(-fast * t) - fast * Math.exp(-slow * t)) / (fast - slow))
    expect(stepResponse(h, times)).toAgreeWith(wanted, { absolute: 1e-14 })
    // First order but for the fast pole: ln 9 time constants.
    expect(stepFigures(h).riseTimeSec).toAgreeWith(Math.log(9) / slow, { relative: 1e-9 })
  })
})

describe('the input itself', () => {
  it('comes through at once in a divider of resistors', () => {
    const cards = ['R1 in out 1000', 'R2 out 0 3000']
    const h = rationalTransferFunction(prepareCircuit(netlistOf(cards)), valuesOf(cards))
    expect(stepResponse(h, [-1, 0, 1])).toAgreeWith([0, 0.75, 0.75], { relative: 1e-14 })
    expect(impulseWeight(h)).toAgreeWith(0.75, { relative: 1e-14 })
    expect(impulseResponse(h, [1])[0]).toBe(0)
    expect(stepFigures(h)).toMatchObject({ overshoot: 0, riseTimeSec: 0 })
  })

  it('starts an all-pass at the opposite sign, whose extreme is the limit', () => {
    const figures = stepFigures(rational(real(-1), real(1), -1))
    expect(figures).toMatchObject({ startVolt: -1, finalVolt: 1, overshoot: 0 })
    // 1 − 2e^{−t} is 0.1 at ln(2/0.9) and 0.9 at ln 20.
    expect(figures.riseTimeSec).toAgreeWith(Math.log(20) - Math.log(2 / 0.9), { relative: 1e-12 })
  })

  it('overshoots by exp(−π·ζ/√(1 − ζ²)) at second order, Q up to 100', () => {
    for (const q of [0.6, 1, 5, 100]) {
      const damping = 1 / (2 * q)
      const im = Math.sqrt(1 - damping * damping)
      const { overshoot, extreme } = stepFigures(
        rational([
          { re: -damping, im },
          { re: -damping, im: -im },
        ]),
      )
      expect(overshoot).toAgreeWith(Math.exp((-Math.PI * damping) / im), { relative: 1e-10 })
      expect(extreme!.timeSec).toAgreeWith(Math.PI / im, { relative: 1e-9 })
    }
  })

  it('gives nothing where nothing comes through', () => {
    const h = { ...rational([], [], 0), numerator: [0] }
    expect(stepResponse(h, [0, 1])).toEqual(Float64Array.of(0, 0))
    expect(stepFigures(h)).toMatchObject({ startVolt: 0, finalVolt: 0, riseTimeSec: null })
  })
})
