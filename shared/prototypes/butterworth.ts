import { withConjugates, withDcGain, type ZeroPoleGain } from './zero-pole-gain'

/**
 * Angles of the Butterworth poles from the negative real axis, (2k − 1 − n) π/2n for those at or above it, largest
 * first; Chebyshev's poles lie at the same angles on an ellipse.
 */
export const butterworthAngles = (order: number): number[] =>
  Array.from({ length: Math.ceil(order / 2) }, (_, k) => (Math.PI * (order - 1 - 2 * k)) / (2 * order))

/**
 * Butterworth (maximally flat) low-pass, half-power at 1 rad/s: |H(jω)|² = 1/(1 + ω^2n).
 *
 * @param order n, 1 to 20
 * @returns n poles on the unit circle, gain 1 at 0 rad/s
 * @example butterworth(2).poles[0] // -0.7071 + 0.7071j
 * Source: S. Butterworth, Experimental Wireless 7 (1930) 536; A. I. Zverev, Handbook of Filter Synthesis (1967), from memory.
 */
export const butterworth = (order: number): ZeroPoleGain =>
  withDcGain([], withConjugates(butterworthAngles(order).map((a) => ({ re: -Math.cos(a), im: Math.sin(a) }))), 1)
