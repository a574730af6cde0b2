import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { bandKind, gainAtHighFrequency, halfPower, notch, peak, rippleEdge } from '#shared/analysis/figures'
import { prepareCircuit } from '#shared/analysis/nodal-analysis'
import { groupDelaySec, phaseRad } from '#shared/analysis/phase'
import type { RationalTransferFunction } from '#shared/analysis/rational'
import { rationalTransferFunction } from '#shared/analysis/rational'
import type { Complex } from '#shared/numerics/complex'
import { polynomialFromRoots } from '#shared/numerics/polynomial'
import { complexOf, netlistOf, netlistOfCheck, readCheck, valuesOf } from '../../support/circuits'
import type { CheckVector } from '../../support/circuits'

const ofRoots = (zeros: Complex[], poles: Complex[], gain: number): RationalTransferFunction => ({
  numerator: polynomialFromRoots(zeros).map((c) => c * gain),
  denominator: polynomialFromRoots(poles),
  zeros,
  poles,
  gain,
})
const real = (...values: number[]) => values.map((re) => ({ re, im: 0 }))
const pair = (re: number, im: number) => [
  { re, im },
  { re, im: -im },
]
const TAU = 2 * Math.PI
const rationalOf = (cards: string[]) => rationalTransferFunction(prepareCircuit(netlistOf(cards)), valuesOf(cards))

interface Prototype {
  family: string
  order: number
  normalisation: string
  ripple_dB?: number
  zeros: CheckVector
  poles: CheckVector
  gain: number
  omega_3dB?: number
  omega_3dB_of_ripple_edge_version?: number
}
// Source: scipy.signal butter, cheby1, cheby2, bessel, cross-checked by the textbook formulas, as the header says.
const { prototypes } = JSON.parse(
  readFileSync(new URL('../../checks/prototypes-for-figures.json', import.meta.url), 'utf8'),
) as { prototypes: Prototype[] }
const prototype = (family: string, order: number, normalisation: string) => {
  const found = prototypes.find(
    (one) => one.family === family && one.order === order && one.normalisation.startsWith(normalisation),
  )!
  return ofRoots(complexOf(found.zeros), complexOf(found.poles), found.gain)
}

describe('edges of prototypes at 1 rad/s', () => {
  it.each([
    ['butterworth', 4],
    ['chebyshev1', 5],
    ['chebyshev2', 5],
  ])('half power of %s of order %d', (family, order) => {
    const edges = halfPower(prototype(family, order, 'half-power'))!
    expect(edges.upperHz! * TAU).toAgreeWith(1, { relative: 1e-8 })
    expect(edges.reference).toAgreeWith(1, { relative: 1e-9 })
  })

  it('half power of a Bessel low-pass of unit delay, whose delay at 0 Hz is 1 s', () => {
    const h = prototype('bessel', 5, 'unit group delay')
    expect(halfPower(h)!.upperHz! * TAU).toAgreeWith(2.427410702153, { relative: 1e-8 })
    expect(groupDelaySec(h, [0, 1e-6])).toAgreeWith([1, 1], { relative: 1e-9 })
  })

  it.each([4, 5])('ripple edge of a Chebyshev low-pass of order %d, 1 dB', (order) => {
    expect(rippleEdge(prototype('chebyshev1', order, 'ripple edge'), 1)!.upperHz! * TAU).toAgreeWith(1, {
      relative: 1e-8,
    })
  })

  it('deepest notch of a Chebyshev II low-pass', () => {
    const { frequencyHz, depth } = notch(prototype('chebyshev2', 5, 'stop-band edge'))!
    expect(depth).toBe(0)
    expect(frequencyHz * TAU).toAgreeWith(1.051462224238, { relative: 1e-8 })
  })

  it('has no peak when maximally flat', () => {
    expect(peak(prototype('butterworth', 4, 'half-power'))).toBeNull()
    expect(notch(prototype('butterworth', 4, 'half-power'))).toBeNull()
  })
})

describe('kinds, peaks and notches', () => {
  it.each([
    ['low-pass', ofRoots([], real(-1), 1)],
    ['high-pass', ofRoots(real(0), real(-1), 1)],
    ['band-pass', ofRoots(real(0), pair(-0.1, 1), 1)],
    ['band-stop', ofRoots(pair(0, 1), pair(-0.1, 1), 1)],
    ['low-pass', ofRoots(real(-10), real(-1), 1)],
    ['high-pass', ofRoots(real(-1), real(-10), 1)],
  ])('tells a %s by its limits', (kind, h) => {
    expect(bandKind(h)).toBe(kind)
  })

  it('finds a peak of Q = 10⁵ and its half-power edges', () => {
    // Second-order band-pass: edges f_0(√(1 + 1/4Q²) ± 1/2Q), peak K (Van Valkenburg 1982, from memory).
    const q = 1e5
    const h = ofRoots(real(0), pair(-1 / (2 * q), Math.sqrt(1 - 1 / (4 * q * q))), 1 / q)
    const edges = halfPower(h)!
    const middle = Math.sqrt(1 + 1 / (4 * q * q))
    expect(peak(h)!.gain).toAgreeWith(1, { relative: 1e-9 })
    expect(peak(h)!.frequencyHz * TAU).toAgreeWith(1, { relative: 1e-9 })
    expect(edges.lowerHz! * TAU).toAgreeWith(middle - 1 / (2 * q), { relative: 1e-9 })
    expect(edges.upperHz! * TAU).toAgreeWith(middle + 1 / (2 * q), { relative: 1e-9 })
  })

  it('finds the half-power edges of a twin-T: f_0(√5 ± 2)', () => {
    const h = rationalOf([
      'R1 in a 10000',
      'R2 a out 10000',
      'C3 a 0 2e-8',
      'C1 in b 1e-8',
      'C2 b out 1e-8',
      'R3 b 0 5000',
    ])
    const { lowerHz, upperHz } = halfPower(h)!
    // |H|² = ½ where (1 − x²)² = 16x², x = f/f_0.
    expect((lowerHz! * TAU) / 1e4).toAgreeWith(Math.sqrt(5) - 2, { relative: 1e-9 })
    expect((upperHz! * TAU) / 1e4).toAgreeWith(Math.sqrt(5) + 2, { relative: 1e-9 })
    expect(notch(h)).toEqual({ frequencyHz: 1e4 / TAU, depth: 0 })
  })

  it('takes the limit at high frequency as reference of a high-pass, with its sign as gain', () => {
    const check = readCheck('hp1-inverting')
    const h = rationalTransferFunction(prepareCircuit(netlistOfCheck('hp1-inverting')), check.parts)
    expect(gainAtHighFrequency(h)).toAgreeWith(check.figures.K!, { relative: 1e-9 })
    expect(halfPower(h)!.reference).toAgreeWith(10, { relative: 1e-9 })
  })

  it('has no edges without a reference: integrator, differentiator, all-pass', () => {
    expect(halfPower(ofRoots([], real(0), -1))).toBeNull()
    expect(halfPower(ofRoots(real(0), [], -1))).toBeNull()
    expect(halfPower(ofRoots(real(1), real(-1), 1))).toEqual({ reference: 1 })
    expect(peak(ofRoots(real(1), real(-1), 1))).toBeNull()
    expect(gainAtHighFrequency(ofRoots(real(0), [], -1))).toBe(-Infinity)
  })

  it('finds the depth of a notch that is not perfect', () => {
    // (s² + s·ω₀/Q_z + ω₀²)/(s² + s·ω₀/Q_p + ω₀²) is Q_p/Q_z at ω₀.
    const h = ofRoots(pair(-0.005, Math.sqrt(1 - 0.005 ** 2)), pair(-0.5, Math.sqrt(0.75)), 1)
    expect(notch(h)!.depth).toAgreeWith(0.01, { relative: 1e-9 })
    expect(notch(h)!.frequencyHz * TAU).toAgreeWith(1, { relative: 1e-9 })
  })
})

describe('phase', () => {
  // Limits at low frequency from the definition: K·(jω)^k, −1 being +180°.
  it.each([
    ['a positive gain', ofRoots([], real(-1), 1), 0],
    ['an inverting low-pass', ofRoots([], real(-1), -1), Math.PI],
    ['a first-order high-pass', ofRoots(real(0), real(-1), 1), Math.PI / 2],
    ['an inverting first-order high-pass', ofRoots(real(0), real(-1), -1), -Math.PI / 2],
    ['a second-order high-pass', ofRoots(real(0, 0), pair(-1, 1), 1), Math.PI],
    ['an inverting second-order high-pass', ofRoots(real(0, 0), pair(-1, 1), -1), 0],
    ['a third-order high-pass', ofRoots(real(0, 0, 0), real(-1, -2, -3), 1), -Math.PI / 2],
    ['an integrator', ofRoots([], real(0), 1), -Math.PI / 2],
    ['an inverting integrator', ofRoots([], real(0), -1), Math.PI / 2],
    ['an all-pass that starts at +1', ofRoots(real(1), real(-1), -1), 0],
  ])('starts %s at its limit', (_, h, wanted) => {
    expect(phaseRad(h, [1e-12])[0]).toAgreeWith(wanted, { absolute: 1e-9 })
  })

  it('runs on without a jump and does not depend on where the frequencies begin', () => {
    const h = ofRoots([], [...pair(-0.1, 1), ...pair(-0.1, 2), ...pair(-0.1, 3)], -36)
    expect(phaseRad(h, [1e9])[0]).toAgreeWith(Math.PI - 3 * Math.PI, { absolute: 1e-8 })
    const all = phaseRad(h, [0.01, 0.5, 0.7])
    expect(phaseRad(h, [0.7])[0]).toBe(all[2])
  })

  it('steps up by 180° at a zero on the axis and down at a pole there', () => {
    const notched = phaseRad(ofRoots(pair(0, 1), pair(-1, 0.5), 1), [0.999999 / TAU, 1.000001 / TAU])
    expect(notched[1]! - notched[0]!).toAgreeWith(Math.PI, { absolute: 1e-5 })
    const lossless = phaseRad(ofRoots([], pair(0, 1), 1), [0.999 / TAU, 1.001 / TAU])
    expect(Array.from(lossless)).toEqual([0, -Math.PI])
  })

  it('has the derivative that the group delay states', () => {
    const h = ofRoots([...pair(0.3, 1.2), ...real(-4)], [...pair(-0.1, 1), ...real(-2, -5)], 3)
    for (const f of [0.05, 0.15, 0.2, 1]) {
      const [before, after] = phaseRad(h, [f - 1e-5, f + 1e-5])
      expect(groupDelaySec(h, [f])[0]).toAgreeWith((before! - after!) / (TAU * 2e-5), {
        relative: 1e-6,
        absolute: 1e-8,
      })
    }
  })

  it('gives a second-order all-pass twice the delay of its poles', () => {
    const h = ofRoots(pair(0.5, 2), pair(-0.5, 2), 1)
    // At ω = 0: 4σ/ω₀² by symmetry.
    expect(groupDelaySec(h, [0])[0]).toAgreeWith((4 * 0.5) / (0.25 + 4), { relative: 1e-12 })
  })
})
