import { describe, expect, it } from 'vitest'
import { halfPower, peak } from '#shared/analysis/figures'
import { inputImpedance, prepareCircuit, response } from '#shared/analysis/nodal-analysis'
import { phaseRad } from '#shared/analysis/phase'
import type { RationalTransferFunction } from '#shared/analysis/rational'
import { gainAt, naturalFrequencies, rationalTransferFunction } from '#shared/analysis/rational'
import { bracketedRoot } from '#shared/numerics/brent'
import {
  CHECK_CIRCUITS,
  amplifiersOfCheck,
  complexOf,
  netlistOfCheck,
  readCheck,
  setDistance,
  valuesOfCheck,
} from '../../../support/circuits'

// Sources, as each file's header says: responses and input impedances ngspice-39 `.ac` with A0, RC and buffer in place of
// each op-amp; measured figures and natural frequencies NumPy on the same network.
describe.each(CHECK_CIRCUITS)('%s with one-pole op-amps', (name) => {
  const check = readCheck(name)
  const prepared = prepareCircuit(netlistOfCheck(name), { amplifiers: amplifiersOfCheck(name, 'one_pole') })
  const values = valuesOfCheck(name)
  const labels = Object.keys(check.outputs)

  it.each(labels)('gives the response of ngspice at %s, directly and from poles and zeros', (label) => {
    const { frequency_Hz: frequencies } = check.response
    const { re, im } = check.response[label]!.one_pole
    const direct = response(prepared, values, frequencies, label)
    const h = rationalTransferFunction(prepared, values, label)
    const most = Math.max(...re.map((x, k) => Math.hypot(x, im[k]!)))
    frequencies.forEach((f, k) => {
      const bound = 1e-6 * Math.hypot(re[k]!, im[k]!) + 1e-8 * most
      const rational = gainAt(h, f)
      expect(Math.hypot(direct.re[k]! - re[k]!, direct.im[k]! - im[k]!)).toBeLessThanOrEqual(bound)
      expect(Math.hypot(rational.re - re[k]!, rational.im - im[k]!)).toBeLessThanOrEqual(bound)
    })
  })

  it('gives the input impedance of ngspice', () => {
    const { frequency_Hz: frequencies, one_pole: wanted } = check.input_impedance
    const got = inputImpedance(prepared, values, frequencies)
    frequencies.forEach((_, k) => {
      const size = Math.hypot(wanted.re[k]!, wanted.im[k]!)
      expect(Math.hypot(got.re[k]! - wanted.re[k]!, got.im[k]! - wanted.im[k]!)).toBeLessThanOrEqual(1e-6 * size)
    })
  })

  it('has the natural frequencies of the network', () => {
    expect(setDistance(naturalFrequencies(prepared, values), complexOf(check.poles_one_pole))).toBeLessThan(1e-6)
  })

  it.each(labels)('finds the measured figures of the curve at %s', (label) => {
    const h = rationalTransferFunction(prepared, values, label)
    const wanted = check.measured[label]!.one_pole
    const found: Record<string, number | undefined> = {
      f_3dB: wanted.level === undefined ? undefined : crossing(h, wanted.level, wanted.f_3dB ?? NaN),
      f_3dB_low: halfPower(h, 'band-pass')?.lowerHz,
      f_3dB_high: halfPower(h, 'band-pass')?.upperHz,
      peak_gain: peak(h)?.gain,
      f_phase: wanted.f_phase === undefined ? undefined : quarterTurn(h, wanted.f_phase),
    }
    const compared = Object.keys(found).filter((figure) => wanted[figure] !== undefined)
    expect(compared.length).toBeGreaterThan(0)
    for (const figure of compared) expect(found[figure], figure).toAgreeWith(wanted[figure]!, { relative: 1e-6 })
    // Flat extremum: the header's tolerance.
    if (wanted.f_peak) expect(peak(h)!.frequencyHz).toAgreeWith(wanted.f_peak, { relative: 1e-4 })
  })
})

/** Where |H| passes a level within 1 % of a frequency: the level of the file is that of the ideal circuit. */
const crossing = (h: RationalTransferFunction, level: number, nearHz: number) =>
  bracketedRoot((f) => Math.hypot(gainAt(h, f).re, gainAt(h, f).im) - level, 0.99 * nearHz, 1.01 * nearHz)

/** Where the phase is 90° behind that at 0 Hz. */
const quarterTurn = (h: RationalTransferFunction, nearHz: number) => {
  const start = phaseRad(h, [0])[0]!
  return bracketedRoot((f) => phaseRad(h, [f])[0]! - start + Math.PI / 2, 0.99 * nearHz, 1.01 * nearHz)
}
