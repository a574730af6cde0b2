import type { Complex } from '../numerics/complex'

/**
 * A filter by its zeros and poles, rad/s, complex ones in exact conjugate pairs:
 *
 *     H(s) = gain · Π(s − zero) / Π(s − pole)
 */
export interface ZeroPoleGain {
  zeros: Complex[]
  poles: Complex[]
  gain: number
}

/** The given roots, those off the real axis followed by their conjugates. @param upper roots with im ≥ 0 */
export const withConjugates = (upper: readonly Complex[]): Complex[] =>
  upper.flatMap(({ re, im }) =>
    im === 0
      ? [{ re, im: 0 }]
      : [
          { re, im },
          { re, im: -im },
        ],
  )

/** Π(−root), a real number as the roots come in conjugate pairs; 1 for none. */
export function productOfNegatives(roots: readonly Complex[]): number {
  let product = 1
  for (const { re, im } of roots)
    if (im === 0) product *= -re
    else if (im > 0) product *= re * re + im * im
  return product
}

/** The filter with these roots whose gain at 0 rad/s is the given one. @param dcGain ratio, as no zero is at the origin */
export const withDcGain = (zeros: Complex[], poles: Complex[], dcGain: number): ZeroPoleGain => ({
  zeros,
  poles,
  gain: (dcGain * productOfNegatives(poles)) / productOfNegatives(zeros),
})

/** H(0), a ratio with its sign. */
export const dcGain = ({ zeros, poles, gain }: ZeroPoleGain): number =>
  (gain * productOfNegatives(zeros)) / productOfNegatives(poles)

/**
 * |H(jω)| from zeros, poles and gain, factor by factor, so that neither high orders nor high frequencies overflow.
 * @param radPerSec ω, rad/s
 */
export function magnitudeAt({ zeros, poles, gain }: ZeroPoleGain, radPerSec: number): number {
  const distance = ({ re, im }: Complex) => Math.hypot(re, radPerSec - im)
  let magnitude = Math.abs(gain)
  const unused = zeros.map(distance)
  for (const pole of poles) magnitude *= (unused.pop() ?? 1) / distance(pole)
  return unused.reduce((product, d) => product * d, magnitude)
}

/**
 * The same shape at another frequency: what was at 1 rad/s is at the given one, the gain of the band unchanged.
 * @param radPerSec rad/s, > 0
 */
export const scaledInFrequency = ({ zeros, poles, gain }: ZeroPoleGain, radPerSec: number): ZeroPoleGain => {
  const scaled = ({ re, im }: Complex) => ({ re: re * radPerSec, im: im * radPerSec })
  return {
    zeros: zeros.map(scaled),
    poles: poles.map(scaled),
    gain: gain * radPerSec ** (poles.length - zeros.length),
  }
}
