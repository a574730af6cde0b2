import { butterworthAngles } from './butterworth'
import { rippleFactor } from './ripple'
import { withConjugates, withDcGain, type ZeroPoleGain } from './zero-pole-gain'

/**
 * Inverse Chebyshev low-pass (flat pass band, equal ripple in the stop band), stop-band edge at 1 rad/s:
 * |H(jω)|² = 1/(1 + ε_s²/T_n²(1/ω)). The gain at 0 rad/s is 1; at infinity it is 0 for odd orders, −stopDb for even.
 *
 * @param order n, 1 to 20
 * @param stopDb least loss in the stop band, dB, > 0
 * @returns poles at the reciprocals of a Chebyshev ellipse's, zeros at ±j/cos((2k − 1) π/2n)
 * @example chebyshev2(2, 40).zeros[0].im // 1.4142
 * Source: L. Weinberg, Network Analysis and Synthesis (1962); R. W. Daniels, Approximation Methods for Electronic Filter
 * Design (1974), from memory.
 */
export function chebyshev2(order: number, stopDb: number): ZeroPoleGain {
  const a = Math.asinh(rippleFactor(stopDb)) / order
  const angles = butterworthAngles(order)
  const poles = angles.map((angle) => {
    const re = -Math.sinh(a) * Math.cos(angle)
    const im = Math.cosh(a) * Math.sin(angle)
    const size = re * re + im * im
    return { re: re / size, im: im / size }
  })
  const zeros = angles.filter((angle) => angle !== 0).map((angle) => ({ re: 0, im: 1 / Math.sin(angle) }))
  return withDcGain(withConjugates(zeros), withConjugates(poles), 1)
}

/**
 * Where that filter passes half power: ω with T_n(1/ω) = ε_s.
 * @param stopDb dB, above 3.0103, or there is no such frequency before the stop band
 * @returns rad/s, the stop-band edge being 1
 * Source: as for the poles.
 */
export const chebyshev2HalfPower = (order: number, stopDb: number): number =>
  1 / Math.cosh(Math.acosh(rippleFactor(stopDb)) / order)
