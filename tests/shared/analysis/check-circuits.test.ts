import { describe, expect, it } from 'vitest'
import { bandKind, gainAtHighFrequency, halfPower, notch, peak } from '#shared/analysis/figures'
import { inputImpedance, prepareCircuit, response } from '#shared/analysis/nodal-analysis'
import { groupDelaySec, phaseRad } from '#shared/analysis/phase'
import { gainAt, polePairs, rationalTransferFunction } from '#shared/analysis/rational'
import {
  CHECK_CIRCUITS,
  complexOf,
  netlistOfCheck,
  readCheck,
  setDistance,
  valuesOfCheck,
} from '../../support/circuits'

// Sources, as each file's header says: responses ngspice-39 `.ac` with E gain 1e9; figures closed forms of Sedra & Smith,
// Van Valkenburg 1982, Sallen & Key 1955, Huelsman & Allen 1980 (from memory); input impedance ngspice; poles, zeros and
// group delay from the closed forms, held against NumPy eigenvalues.
describe.each(CHECK_CIRCUITS)('%s', (name) => {
  const check = readCheck(name)
  const prepared = prepareCircuit(netlistOfCheck(name))
  const values = valuesOfCheck(name)
  const labels = Object.keys(check.outputs)

  it.each(labels)('gives the response of ngspice at %s', (label) => {
    const { frequency_Hz: frequencies } = check.response
    const { re, im } = check.response[label]!.ideal
    const got = response(prepared, values, frequencies, label)
    const most = Math.max(...re.map((x, k) => Math.hypot(x, im[k]!)))
    frequencies.forEach((_, k) => {
      const bound = 1e-6 * Math.hypot(re[k]!, im[k]!) + 1e-8 * most
      expect(Math.hypot(got.re[k]! - re[k]!, got.im[k]! - im[k]!)).toBeLessThanOrEqual(bound)
    })
  })

  it.each(labels)('gives poles and zeros at %s', (label) => {
    const { poles, zeros } = rationalTransferFunction(prepared, values, label)
    expect(setDistance(poles, complexOf(check.poles_zeros_ideal[label]!.poles))).toBeLessThan(1e-9)
    expect(setDistance(zeros, complexOf(check.poles_zeros_ideal[label]!.zeros))).toBeLessThan(1e-9)
  })

  it.each(labels)('gives the rational function that the response follows at %s', (label) => {
    const h = rationalTransferFunction(prepared, values, label)
    const { frequency_Hz: frequencies } = check.response
    const direct = response(prepared, values, frequencies, label)
    frequencies.forEach((f, k) => {
      const { re, im } = gainAt(h, f)
      const size = Math.hypot(re, im)
      expect(Math.hypot(re - direct.re[k]!, im - direct.im[k]!)).toBeLessThanOrEqual(1e-11 * size)
      const turn = phaseRad(h, [f])[0]! - Math.atan2(im, re)
      expect(Math.abs(Math.sin(turn / 2))).toBeLessThan(1e-9)
    })
  })

  it.each(labels)('gives the group delay at %s', (label) => {
    const wanted = check.group_delay_ideal_s[label]!
    const got = groupDelaySec(rationalTransferFunction(prepared, values, label), check.group_delay_ideal_s.frequency_Hz)
    expect(got).toAgreeWith(wanted, { absolute: 1e-6 * Math.max(...wanted) })
  })

  it('gives the input impedance of ngspice', () => {
    const { frequency_Hz: frequencies, ideal } = check.input_impedance
    const got = inputImpedance(prepared, values, frequencies)
    frequencies.forEach((_, k) => {
      const size = Math.hypot(ideal.re[k]!, ideal.im[k]!)
      expect(Math.hypot(got.re[k]! - ideal.re[k]!, got.im[k]! - ideal.im[k]!)).toBeLessThanOrEqual(1e-6 * size)
    })
  })

  it.each(labels)('finds the measured figures of the curve at %s', (label) => {
    const h = rationalTransferFunction(prepared, values, label)
    const wanted = check.measured[label]!.ideal
    const found: Record<string, number | undefined> = {
      f_3dB: halfPower(h)?.lowerHz ?? halfPower(h)?.upperHz,
      f_3dB_low: halfPower(h)?.lowerHz,
      f_3dB_high: halfPower(h)?.upperHz,
      peak_gain: peak(h)?.gain,
    }
    for (const [figure, got] of Object.entries(found))
      if (wanted[figure] !== undefined) expect(got, figure).toAgreeWith(wanted[figure], { relative: 1e-6 })
    // Flat extremum: the header's tolerance.
    if (wanted.f_peak) expect(peak(h)!.frequencyHz).toAgreeWith(wanted.f_peak, { relative: 1e-4 })
  })

  it('finds the figures of the closed form', () => {
    const h = rationalTransferFunction(prepared, values)
    const { figures } = check
    const [pair] = polePairs(h.poles)
    const [pole] = h.poles
    const low = gainAt(h, 0).re
    const banded = bandKind(h) === 'band-pass'
    const edges = labels.map((label) => halfPower(rationalTransferFunction(prepared, values, label)))
    const band = edges.find((one) => one?.lowerHz !== undefined && one.upperHz !== undefined)
    const found: Record<string, number | undefined> = {
      f_0: pair?.naturalHz ?? Math.hypot(pole!.re, pole!.im) / (2 * Math.PI),
      Q: pair?.q,
      K: banded ? gainAt(h, peak(h)!.frequencyHz).re : low === 0 ? gainAtHighFrequency(h) : low,
      f_3dB: edges[0]?.lowerHz ?? edges[0]?.upperHz,
      f_3dB_low: band?.lowerHz,
      f_3dB_high: band?.upperHz,
    }
    const compared = Object.keys(found).filter((figure) => figures[figure] !== undefined)
    expect(compared.length).toBeGreaterThan(1)
    for (const figure of compared) expect(found[figure], figure).toAgreeWith(figures[figure]!, { relative: 1e-9 })
    expect(notch(h)).toBeNull()
  })
})
