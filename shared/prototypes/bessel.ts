import { bracketedRoot } from '../numerics/brent'
import type { Complex } from '../numerics/complex'
import { polynomialRoots } from '../numerics/polynomial'
import { magnitudeAt, withConjugates, withDcGain, type ZeroPoleGain } from './zero-pole-gain'

const FRACTION_BITS = 160n
const ONE = 1n << FRACTION_BITS
const POLISHING_ROUNDS = 8

/**
 * Bessel low-pass (maximally flat delay), group delay 1 s at 0 rad/s: H(s) = θ_n(0)/θ_n(s), θ_n the reverse Bessel
 * polynomial.
 *
 * @param order n, 1 to 20
 * @returns n poles, gain 1 at 0 rad/s
 * @example bessel(2).poles[0] // -1.5 + 0.866j
 * Source: W. E. Thomson, Proc. IEE 96 III (1949) 487; coefficients (2n − k)!/(2^(n−k) k! (n − k)!).
 */
export function bessel(order: number): ZeroPoleGain {
  const coefficients = reverseBesselCoefficients(order)
  // In units of the roots' mean size the coefficients lie near each other.
  const size = Number(coefficients[order]) ** (1 / order)
  const roots = polynomialRoots(coefficients.map((c, k) => Number(c) / size ** k))
  const poles = roots
    .filter(({ im }) => im >= 0)
    .map(({ re, im }) => polished(coefficients, { re: re * size, im: im * size }))
  return withDcGain([], withConjugates(poles), 1)
}

/**
 * Factor from the unit-delay poles to those with the high-frequency asymptote of the Butterworth: θ_n(0)^(1/n).
 * @returns rad/s
 */
export const besselAsymptote = (order: number): number => Number(reverseBesselCoefficients(order)[order]) ** (1 / order)

/** Where the unit-delay filter passes half power. @returns rad/s */
export function besselHalfPower(order: number): number {
  const filter = bessel(order)
  return bracketedRoot((radPerSec) => magnitudeAt(filter, radPerSec) ** 2 - 0.5, 0.1, 20)
}

/** Coefficients of θ_n in descending powers, exact: 1 first, (2n)!/(2^n n!) last. */
function reverseBesselCoefficients(order: number): bigint[] {
  const coefficients = [1n]
  // c(k − 1)/c(k) = (2n − k + 1) k / (2 (n − k + 1)), from the closed form.
  for (let k = order; k >= 1; k--)
    coefficients.push((coefficients[order - k]! * BigInt((2 * order - k + 1) * k)) / BigInt(2 * (order - k + 1)))
  return coefficients
}

/** Newton's steps in fixed point of 160 bits: the polynomial is too ill-conditioned for doubles at high orders. */
function polished(coefficients: readonly bigint[], root: Complex): Complex {
  let re = toFixed(root.re)
  let im = toFixed(root.im)
  for (let round = 0; round < POLISHING_ROUNDS; round++) {
    let [pRe, pIm, dRe, dIm] = [0n, 0n, 0n, 0n]
    for (const c of coefficients) {
      ;[dRe, dIm] = [times(dRe, re) - times(dIm, im) + pRe, times(dRe, im) + times(dIm, re) + pIm]
      ;[pRe, pIm] = [times(pRe, re) - times(pIm, im) + (c << FRACTION_BITS), times(pRe, im) + times(pIm, re)]
    }
    const size = times(dRe, dRe) + times(dIm, dIm)
    re -= ((times(pRe, dRe) + times(pIm, dIm)) << FRACTION_BITS) / size
    im -= ((times(pIm, dRe) - times(pRe, dIm)) << FRACTION_BITS) / size
  }
  return { re: toNumber(re), im: toNumber(im) }
}

const times = (a: bigint, b: bigint): bigint => (a * b) >> FRACTION_BITS
const toFixed = (x: number): bigint => BigInt(Math.round(x * 2 ** 48)) << (FRACTION_BITS - 48n)
const toNumber = (x: bigint): number => Number(x) / Number(ONE)
