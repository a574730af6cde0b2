import { describe, expect, it } from 'vitest'
import { outputImpedance, prepareCircuit, response } from '#shared/analysis/nodal-analysis'
import type { Amplifier } from '#shared/analysis/op-amp/amplifier'
import { gainAt, rationalTransferFunction } from '#shared/analysis/rational'
import { outputNoise } from '#shared/noise/output-noise'
import type { Complex } from '#shared/numerics/complex'
import { divide } from '#shared/numerics/polynomial'
import { CHECK_CIRCUITS, netlistOf, netlistOfCheck, valuesOf, valuesOfCheck } from '../../../support/circuits'

const [ri, rf, cf, load, a0, gbw, second, ro, cin] = [1e4, 1e5, 1.5e-9, 2000, 1e5, 1e6, 3e6, 75, 8e-12] as const
const RECORD: Amplifier = {
  openLoopGain: a0,
  gbwHz: gbw,
  secondPoleHz: second,
  outputOhm: ro,
  inputFarad: cin,
  noiseVoltPerRtHz: 6e-9,
  noiseAmpPerRtHz: 3e-13,
}
const FREQUENCIES = [0.1, 10, 1e3, 1e5, 1e6, 1e7, 1e9]

const plus = (...terms: Complex[]): Complex => ({
  re: terms.reduce((sum, { re }) => sum + re, 0),
  im: terms.reduce((sum, { im }) => sum + im, 0),
})
const times = (a: Complex, b: Complex): Complex => ({ re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re })
const real = (re: number): Complex => ({ re, im: 0 })
const size = ({ re, im }: Complex) => Math.hypot(re, im)

/**
 * Output voltage of the inverting low-pass, loaded, for a current into n, a current into out, and a voltage e in series
 * with the grounded input: the two nodal equations by Cramer's rule, written out by hand.
 */
function byHand(f: number, intoN: number, intoOut: number, e: number): Complex {
  const w = 2 * Math.PI * f
  const feedback = { re: 1 / rf, im: w * cf }
  const back = { re: -feedback.re, im: -feedback.im }
  const gain = divide(real(a0), times({ re: 1, im: (f * a0) / gbw }, { re: 1, im: f / second }))
  const driven = { re: gain.re / ro, im: gain.im / ro }
  // C_in ends at the grounded pin, behind e.
  const nn = plus(real(1 / ri), feedback, { re: 0, im: w * cin })
  const oo = plus(feedback, real(1 / load + 1 / ro))
  const on = plus(back, driven)
  const determinant = plus(times(nn, oo), times(real(-1), times(back, on)))
  const bn = plus(real(intoN))
  const bo = plus(real(intoOut), times(real(e), driven))
  return divide(plus(times(nn, bo), times(real(-1), times(on, bn))), determinant)
}

// Source: Kirchhoff's laws for two nodes, by hand.
describe('the loaded inverting low-pass with a full record', () => {
  const cards = [`Ri in n ${ri}`, `Rf n out ${rf}`, `Cf n out ${cf}`, 'EU1 out 0 0 n 1e9']
  const prepared = prepareCircuit(netlistOf(cards), { amplifiers: { U1: RECORD }, loadOhm: load })
  const values = valuesOf(cards)

  it('has the response of its nodal equations', () => {
    const got = response(prepared, values, FREQUENCIES)
    FREQUENCIES.forEach((f, k) => {
      const wanted = byHand(f, 1 / ri, 0, 0)
      expect(Math.hypot(got.re[k]! - wanted.re, got.im[k]! - wanted.im)).toBeLessThanOrEqual(1e-11 * size(wanted))
    })
  })
  it('has their output impedance', () => {
    const got = outputImpedance(prepared, values, FREQUENCIES)
    FREQUENCIES.forEach((f, k) => {
      const wanted = byHand(f, 0, 1, 0)
      expect(Math.hypot(got.re[k]! - wanted.re, got.im[k]! - wanted.im)).toBeLessThanOrEqual(1e-9 * size(wanted))
    })
  })
  it('has their noise', () => {
    const { byContributor } = outputNoise(prepared, values, FREQUENCIES)
    const wanted = (way: (f: number) => Complex, density: number) => FREQUENCIES.map((f) => density * size(way(f)))
    const thermal = (ohm: number) => Math.sqrt((4 * 1.380649e-23 * 300.15) / ohm)
    const close = { relative: 1e-9 }
    expect(byContributor.Ri).toAgreeWith(
      wanted((f) => byHand(f, 1, 0, 0), thermal(ri)),
      close,
    )
    expect(byContributor.Rf).toAgreeWith(
      wanted((f) => byHand(f, 1, -1, 0), thermal(rf)),
      close,
    )
    expect(byContributor['load R']).toAgreeWith(
      wanted((f) => byHand(f, 0, 1, 0), thermal(load)),
      close,
    )
    expect(byContributor['U1.i_n(-)']).toAgreeWith(
      wanted((f) => byHand(f, 1, 0, 0), 3e-13),
      close,
    )
    expect(byContributor['U1.e_n']).toAgreeWith(
      wanted((f) => byHand(f, 0, 0, 1), 6e-9),
      close,
    )
  })
})

const RECORDS: Record<string, Amplifier> = {
  'every figure': RECORD,
  'no A0': { gbwHz: 1e7, secondPoleHz: 3e7, outputOhm: 10 },
  'A0 alone': { openLoopGain: 1e6 },
  'a GBW below the corner': { openLoopGain: 1e7, gbwHz: 1e3, secondPoleHz: 1e4 },
}

describe.each(CHECK_CIRCUITS)('%s', (name) => {
  it.each(Object.keys(RECORDS))('follows its own poles and zeros over 12 decades with %s', (record) => {
    const netlist = netlistOfCheck(name)
    const opamps = netlist.elements.filter(({ kind }) => kind === 'opamp')
    const amplifiers = Object.fromEntries(opamps.map(({ ref }) => [ref, RECORDS[record]!]))
    const prepared = prepareCircuit(netlist, { amplifiers, sourceOhm: 50, loadOhm: 2000, loadFarad: 1e-10 })
    const frequencies = Array.from({ length: 49 }, (_, k) => 10 ** (-3 + k / 4))
    const { re, im } = response(prepared, valuesOfCheck(name), frequencies)
    const h = rationalTransferFunction(prepared, valuesOfCheck(name))
    const most = Math.max(...re.map((x, k) => Math.hypot(x, im[k]!)))
    frequencies.forEach((f, k) => {
      const rational = gainAt(h, f)
      const bound = 1e-7 * Math.hypot(re[k]!, im[k]!) + 1e-9 * most
      expect(Math.hypot(rational.re - re[k]!, rational.im - im[k]!)).toBeLessThanOrEqual(bound)
    })
  })
})
