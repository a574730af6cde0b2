import { butterworthAngles } from './butterworth'
import { rippleFactor } from './ripple'
import { withConjugates, withDcGain, type ZeroPoleGain } from './zero-pole-gain'

/**
 * Chebyshev low-pass (equal ripple in the pass band), ripple edge at 1 rad/s: |H(jω)|² = 1/(1 + ε² T_n²(ω)).
 * The pass-band maximum is 1, so that even orders have −ripple at 0 rad/s.
 *
 * @param order n, 1 to 20
 * @param rippleDb pass-band ripple, dB, > 0
 * @returns n poles on an ellipse with the half axes sinh a, cosh a, where a = asinh(1/ε)/n
 * @example chebyshev1(1, 3).poles[0].re // -1.0024
 * Source: L. Weinberg, Network Analysis and Synthesis (1962); A. I. Zverev, Handbook of Filter Synthesis (1967), from memory.
 */
export function chebyshev1(order: number, rippleDb: number): ZeroPoleGain {
  const a = Math.asinh(1 / rippleFactor(rippleDb)) / order
  const poles = butterworthAngles(order).map((angle) => ({
    re: -Math.sinh(a) * Math.cos(angle),
    im: Math.cosh(a) * Math.sin(angle),
  }))
  return withDcGain([], withConjugates(poles), order % 2 ? 1 : 10 ** (-rippleDb / 20))
}

/**
 * Where that filter falls through half power: ω with T_n(ω) = 1/ε, the last such frequency where the ripple is deeper
 * than half power.
 * @returns rad/s, the ripple edge being 1
 * Source: as for the poles.
 */
export function chebyshev1HalfPower(order: number, rippleDb: number): number {
  const level = 1 / rippleFactor(rippleDb)
  return level >= 1 ? Math.cosh(Math.acosh(level) / order) : Math.cos(Math.acos(level) / order)
}
