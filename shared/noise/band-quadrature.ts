import type { Complex } from '../numerics/complex'

/** Abscissas above 0 and weights of the eight-point rule on −1 … 1. */
const GAUSS_LEGENDRE_8: readonly [number, number][] = [
  [0.1834346424956498, 0.362683783378362],
  [0.525532409916329, 0.3137066458778873],
  [0.7966664774136267, 0.2223810344533745],
  [0.9602898564975363, 0.1012285362903763],
]

/** Longest piece, in ln f: half a decade. */
const LONGEST = Math.LN10 / 2
/** Around a resonance each piece is so many times as far away as the one before it. */
const GRADING = 4
/** Relative width of a resonance that is looked at at all. */
const NARROWEST = 1e-12

/**
 * Points and weights for an integral over a band of a function with given poles: Gauss–Legendre in ln f on pieces that
 * get as short as a resonance is narrow.
 *
 * @param fromHz > 0
 * @param toHz > fromHz
 * @param poles rad/s
 * @returns Σ weight·S(f) ≈ ∫S df; to about 1e-9 for squares of rational functions of f
 * Source: M. Abramowitz, I. A. Stegun, Handbook of Mathematical Functions, table 25.4.
 */
export function quadratureOver(
  fromHz: number,
  toHz: number,
  poles: readonly Complex[],
): { frequenciesHz: Float64Array; weightsHz: Float64Array } {
  const [from, to] = [Math.log(fromHz), Math.log(toHz)]
  const knots = new Set([from, to])
  const add = (x: number) => x > from && x < to && knots.add(x)
  for (const { re, im } of poles) {
    if (im <= 0) continue
    const centre = Math.log(im / (2 * Math.PI))
    add(centre)
    for (let width = Math.max(Math.abs(re) / im, NARROWEST); width < LONGEST; width *= GRADING) {
      add(centre - width)
      add(centre + width)
    }
  }
  const ends = [...knots].sort((a, b) => a - b)
  const frequencies: number[] = []
  const weights: number[] = []
  for (let k = 1; k < ends.length; k++) {
    const length = ends[k]! - ends[k - 1]!
    const pieces = Math.ceil(length / LONGEST)
    const half = length / pieces / 2
    for (let piece = 0; piece < pieces; piece++) {
      const middle = ends[k - 1]! + (2 * piece + 1) * half
      for (const [x, weight] of GAUSS_LEGENDRE_8)
        for (const sign of [-1, 1]) {
          const frequencyHz = Math.exp(middle + sign * x * half)
          frequencies.push(frequencyHz)
          weights.push(weight * half * frequencyHz)
        }
    }
  }
  return { frequenciesHz: Float64Array.from(frequencies), weightsHz: Float64Array.from(weights) }
}
