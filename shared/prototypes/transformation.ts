import type { Complex } from '../numerics/complex'
import { divide } from '../numerics/polynomial'
import { ProblemError } from '../problems'
import { productOfNegatives, scaledInFrequency, withConjugates, type ZeroPoleGain } from './zero-pole-gain'

const TAU = 2 * Math.PI

/** Where a band begins and ends, hertz. */
export interface Band {
  lowerHz: number
  upperHz: number
}

/**
 * Low-pass with the prototype's 1 rad/s at a frequency: s → s/ω_c.
 *
 * @param cutoffHz Hz, > 0
 * @returns zeros and poles in rad/s
 * @throws {ProblemError} 'value-not-positive'
 * Source: A. I. Zverev, Handbook of Filter Synthesis (1967), from memory, as are the three others.
 */
export function toLowPass(prototype: ZeroPoleGain, cutoffHz: number): ZeroPoleGain {
  requirePositive({ cutoffHz })
  return scaledInFrequency(prototype, TAU * cutoffHz)
}

/**
 * High-pass: s → ω_c/s. Zeros at infinity come to the origin.
 *
 * @param cutoffHz Hz, > 0
 * @returns zeros and poles in rad/s; the gain at infinity is the prototype's at 0 rad/s
 * @throws {ProblemError} 'value-not-positive'
 */
export function toHighPass({ zeros, poles, gain }: ZeroPoleGain, cutoffHz: number): ZeroPoleGain {
  requirePositive({ cutoffHz })
  const turned = mapped((root) => [divide({ re: TAU * cutoffHz, im: 0 }, root)])
  return {
    zeros: [...turned(zeros), ...atOrigin(poles.length - zeros.length)],
    poles: turned(poles),
    gain: (gain * productOfNegatives(zeros)) / productOfNegatives(poles),
  }
}

/**
 * Band-pass of twice the order: s → (s² + ω_0²)/(B s) with ω_0² = ω_1 ω_2 and B = ω_2 − ω_1, so that the prototype's
 * ±1 rad/s come to the two edges and its 0 rad/s to their geometric mean.
 *
 * @param band edges, Hz, 0 < lower < upper
 * @returns zeros and poles in rad/s
 * @throws {ProblemError} 'value-not-positive' or 'value-out-of-range'
 */
export function toBandPass({ zeros, poles, gain }: ZeroPoleGain, band: Band): ZeroPoleGain {
  const { centre, width } = geometry(band)
  const split = mapped(({ re, im }) => bandRoots({ re: (re * width) / 2, im: (im * width) / 2 }, centre))
  const excess = poles.length - zeros.length
  return { zeros: [...split(zeros), ...atOrigin(excess)], poles: split(poles), gain: gain * width ** excess }
}

/**
 * Band-stop of twice the order: s → B s/(s² + ω_0²). Zeros at infinity come to ±jω_0.
 *
 * @param band edges, Hz, 0 < lower < upper
 * @returns zeros and poles in rad/s; the gain at 0 and at infinity is the prototype's at 0 rad/s
 * @throws {ProblemError} 'value-not-positive' or 'value-out-of-range'
 */
export function toBandStop({ zeros, poles, gain }: ZeroPoleGain, band: Band): ZeroPoleGain {
  const { centre, width } = geometry(band)
  const split = mapped((root) => bandRoots(divide({ re: width / 2, im: 0 }, root), centre))
  const notches = Array.from({ length: poles.length - zeros.length }, () => ({ re: 0, im: centre }))
  return {
    zeros: [...split(zeros), ...withConjugates(notches)],
    poles: split(poles),
    gain: (gain * productOfNegatives(zeros)) / productOfNegatives(poles),
  }
}

const atOrigin = (count: number): Complex[] => Array.from({ length: count }, () => ({ re: 0, im: 0 }))

/** Maps one root of each conjugate pair and adds the conjugates, which therefore stay exact. */
const mapped = (map: (root: Complex) => Complex[]) => (roots: readonly Complex[]) =>
  roots.flatMap((root) => {
    if (root.im < 0) return []
    const images = map(root).map(({ re, im }) => ({ re: re + 0, im: im + 0 }))
    return root.im === 0
      ? images
      : images.flatMap(({ re, im }) => [
          { re, im },
          { re, im: -im },
        ])
  })

/** The roots of s² − 2 h s + ω_0²: the larger first, the other as their product over it. */
function bandRoots(half: Complex, centre: number): Complex[] {
  // Factors instead of h² − ω_0², which would lose the digits of a real half near ω_0.
  const minus = { re: half.re - centre, im: half.im }
  const plus = { re: half.re + centre, im: half.im }
  const square = { re: minus.re * plus.re - half.im ** 2, im: 2 * half.re * half.im }
  const root = squareRoot(square)
  const away = half.re * root.re + half.im * root.im < 0 ? -1 : 1
  const larger = { re: half.re + away * root.re, im: half.im + away * root.im }
  // Of a conjugate pair the second is the first turned over.
  if (half.im === 0 && square.re < 0)
    return [
      { re: half.re, im: root.im },
      { re: half.re, im: -root.im },
    ]
  return [larger, divide({ re: centre * centre, im: 0 }, larger)]
}

/** Principal square root. */
function squareRoot({ re, im }: Complex): Complex {
  const size = Math.hypot(re, im)
  if (size === 0) return { re: 0, im: 0 }
  const larger = Math.sqrt((size + Math.abs(re)) / 2)
  const smaller = Math.abs(im) / (2 * larger)
  const sign = im < 0 ? -1 : 1
  return re >= 0 ? { re: larger, im: sign * smaller } : { re: smaller, im: sign * larger }
}

function geometry({ lowerHz, upperHz }: Band) {
  requirePositive({ lowerHz, upperHz })
  if (upperHz <= lowerHz)
    throw new ProblemError('value-out-of-range', `The band ends at ${upperHz} Hz and begins at ${lowerHz} Hz.`, {
      pointer: '#/upperHz',
    })
  return { centre: TAU * Math.sqrt(lowerHz * upperHz), width: TAU * (upperHz - lowerHz) }
}

function requirePositive(values: Record<string, number>) {
  for (const [name, value] of Object.entries(values))
    if (!(value > 0 && Number.isFinite(value)))
      throw new ProblemError('value-not-positive', `${name} is ${value}; a frequency above zero would do.`, {
        pointer: `#/${name}`,
      })
}
