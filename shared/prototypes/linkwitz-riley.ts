import { butterworth } from './butterworth'
import type { ZeroPoleGain } from './zero-pole-gain'

/**
 * Linkwitz–Riley low-pass, the square of a Butterworth of half the order, half amplitude (−6.02 dB) at 1 rad/s, where
 * it crosses with the high-pass of the same order: |H(jω)| = 1/(1 + ω^n).
 *
 * @param order n, even, 2 to 20
 * @returns every Butterworth pole twice, gain 1 at 0 rad/s
 * @example linkwitzRiley(2).poles[1].re // -1
 * Source: S. H. Linkwitz, J. Audio Eng. Soc. 24 (1976) 2, from memory.
 */
export function linkwitzRiley(order: number): ZeroPoleGain {
  const half = butterworth(order / 2)
  return { zeros: [], poles: half.poles.flatMap((pole) => [{ ...pole }, { ...pole }]), gain: half.gain ** 2 }
}

/** Where that filter passes half power: 1/(1 + ω^n) = 1/√2. @returns rad/s, the crossover being 1 */
export const linkwitzRileyHalfPower = (order: number): number => (Math.SQRT2 - 1) ** (1 / order)
