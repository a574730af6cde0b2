import { describe, expect, it } from 'vitest'
import { inputImpedance, outputImpedance, prepareCircuit, response } from '#shared/analysis/nodal-analysis'
import type { Amplifier } from '#shared/analysis/op-amp/amplifier'
import { openLoopGainAt } from '#shared/analysis/op-amp/amplifier'
import { naturalFrequencies, rationalTransferFunction } from '#shared/analysis/rational'
import { divide } from '#shared/numerics/polynomial'
import { ProblemError } from '#shared/problems'
import { netlistOf, setDistance } from '../../../support/circuits'

const REAL: Amplifier = { openLoopGain: 1e5, gbwHz: 1e6, secondPoleHz: 3e6, outputOhm: 100, inputFarad: 5e-12 }
const FREQUENCIES = [0, 1, 1e3, 1e5, 1e6, 1e8]

const follower = (amplifier: Amplifier) =>
  prepareCircuit(netlistOf(['R1 in p 1000', 'EU1 out 0 p out 1e9']), { amplifiers: { U1: amplifier } })

type Vector = { re: ArrayLike<number>; im: ArrayLike<number> }

const agrees = (got: Vector, k: number, re: number, im: number, relative = 1e-12) =>
  expect(Math.hypot(got.re[k]! - re, got.im[k]! - im)).toBeLessThanOrEqual(relative * Math.hypot(re, im))

describe('A(s)', () => {
  it('is A0 at 0 Hz, 1 at GBW and 1/√2 of that at a second pole there', () => {
    expect(openLoopGainAt(REAL, 0)).toEqual({ re: expect.closeTo(1e5, 6), im: expect.closeTo(0, 12) })
    const { re, im } = openLoopGainAt({ gbwHz: 1e6, secondPoleHz: 1e6 }, 1e6)
    expect(Math.hypot(re, im)).toAgreeWith(Math.SQRT1_2, { relative: 1e-12 })
    expect(Math.atan2(im, re)).toAgreeWith((-3 * Math.PI) / 4, { relative: 1e-12 })
  })
  it('is without end for an op-amp of which nothing is known', () => {
    expect(openLoopGainAt({}, 1e3).re).toBe(Infinity)
  })
})

describe('a follower', () => {
  it('gives A/(1 + A)', () => {
    const amplifier = { openLoopGain: 1e5, gbwHz: 1e6, secondPoleHz: 3e6 }
    const got = response(follower(amplifier), { R1: 1000 }, FREQUENCIES)
    FREQUENCIES.forEach((f, k) => {
      const gain = openLoopGainAt(amplifier, f)
      const { re, im } = divide(gain, { re: 1 + gain.re, im: gain.im })
      agrees(got, k, re, im)
    })
  })
  it('has R_o/(1 + A) as output impedance', () => {
    const amplifier = { openLoopGain: 1e5, gbwHz: 1e6, secondPoleHz: 3e6, outputOhm: 100 }
    const got = outputImpedance(follower(amplifier), { R1: 1000 }, FREQUENCIES)
    FREQUENCIES.forEach((f, k) => {
      const gain = openLoopGainAt(amplifier, f)
      const { re, im } = divide({ re: 100, im: 0 }, { re: 1 + gain.re, im: gain.im })
      agrees(got, k, re, im)
    })
  })
  it('draws the current of C_in, made smaller by 1 + A', () => {
    const amplifier = { openLoopGain: 1e5, gbwHz: 1e6, inputFarad: 5e-12 }
    const frequencies = FREQUENCIES.slice(1)
    const got = inputImpedance(follower(amplifier), { R1: 1000 }, frequencies)
    frequencies.forEach((f, k) => {
      const gain = openLoopGainAt(amplifier, f)
      const bootstrapped = divide({ re: 1 + gain.re, im: gain.im }, { re: 0, im: 2 * Math.PI * f * 5e-12 })
      // The current hangs on the difference of two voltages that agree in five digits.
      agrees(got, k, 1000 + bootstrapped.re, bootstrapped.im, 1e-10)
    })
  })
  it('has the poles of 1/A(s) = −1', () => {
    const poles = naturalFrequencies(follower({ openLoopGain: 1e5, gbwHz: 1e6, secondPoleHz: 3e6 }), { R1: 1000 })
    const [wg, w2] = [2 * Math.PI * 1e6, 2 * Math.PI * 3e6]
    const half = (w2 + wg / 1e5) / 2
    const product = w2 * wg * (1 + 1e-5)
    const root = Math.sqrt(half * half - product)
    const wanted = Number.isNaN(root)
      ? [1, -1].map((sign) => ({ re: -half, im: sign * Math.sqrt(product - half * half) }))
      : [1, -1].map((sign) => ({ re: -half + sign * root, im: 0 }))
    expect(setDistance(poles, wanted)).toBeLessThan(1e-10)
  })
})

describe('the inverting amplifier', () => {
  const netlist = netlistOf(['R1 in n 1000', 'R2 n out 10000', 'EU1 out 0 0 n 1e9'])
  const values = { R1: 1000, R2: 10000 }
  it('loses gain by 1 + (1 + R2/R1)/A0', () => {
    const got = response(prepareCircuit(netlist, { amplifiers: { U1: { openLoopGain: 1000 } } }), values, [0, 1e9])
    expect(got.re).toAgreeWith([-10 / 1.011, -10 / 1.011], { relative: 1e-13 })
  })
  it('is the ideal circuit for an op-amp of which only noise, R_o and C_in are known', () => {
    const amplifiers = { U1: { noiseVoltPerRtHz: 1e-8, outputOhm: 50, inputFarad: 1e-11 } }
    const got = response(prepareCircuit(netlist, { amplifiers }), values, FREQUENCIES)
    expect(got.re).toAgreeWith(
      FREQUENCIES.map(() => -10),
      { relative: 1e-13 },
    )
  })
  it('keeps the ideal op-amp where the record names another', () => {
    const two = netlistOf(['R1 in n 1000', 'R2 n o 10000', 'EU1 o 0 0 n 1e9', 'EU2 out 0 o out 1e9'])
    const h = rationalTransferFunction(prepareCircuit(two, { amplifiers: { U2: { gbwHz: 1e6 } } }), values)
    expect(h.poles).toHaveLength(1)
    expect(h.poles[0]!.re).toAgreeWith(-2 * Math.PI * 1e6, { relative: 1e-12 })
  })
  it('refuses unknown op-amps and impossible figures, all at once', () => {
    const amplifiers = { U7: {}, U1: { openLoopGain: 0, gbwHz: NaN, outputOhm: -1, noiseVoltPerRtHz: Infinity } }
    const attempt = () => prepareCircuit(netlist, { amplifiers })
    expect(attempt).toThrow(ProblemError)
    try {
      attempt()
    } catch (error) {
      const { problems } = error as ProblemError
      expect(problems.map(({ pointer }) => pointer)).toEqual([
        '#/amplifiers/U7',
        '#/amplifiers/U1/openLoopGain',
        '#/amplifiers/U1/gbwHz',
        '#/amplifiers/U1/outputOhm',
        '#/amplifiers/U1/noiseVoltPerRtHz',
      ])
      expect(problems[0].detail).toBe('No op-amp is called U7 in this circuit; its op-amps are U1.')
    }
  })
})
