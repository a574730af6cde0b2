import type { Complex } from '../numerics/complex'
import { ProblemError } from '../problems'
import type { ZeroPoleGain } from './zero-pole-gain'

/**
 * One section of a cascade, rad/s. With the zeros at the origin or at ±jω_z its numerator is s^m or s² + ω_z², its
 * denominator s + ω_0 or s² + s ω_0/Q + ω_0²; the filter's gain stands before the product of all.
 */
export type Section =
  | { order: 1; omega0: number; zerosAtOrigin: 0 | 1 }
  | { order: 2; omega0: number; q: number; omegaZ?: number; zerosAtOrigin: 0 | 1 | 2 }

const HALF_PLANE = 1e-9

/**
 * Sections of a filter, the first-order one first, then by ascending Q. Real poles go in pairs, the smallest with the
 * largest, one at most being left for a first-order section. Zeros are given by `pairZeros`.
 *
 * @param filter poles in the left half plane; zeros at the origin or on the imaginary axis
 * @throws {ProblemError} 'value-out-of-range' when a pole or a zero lies elsewhere
 * @example sectionsOf(butterworth(3)) // [{ order: 1, omega0: 1, … }, { order: 2, omega0: 1, q: 1, … }]
 * Source: common practice; R. Schaumann, M. E. Van Valkenburg, Design of Analog Filters (2001), from memory.
 */
export function sectionsOf({ poles, zeros }: ZeroPoleGain): Section[] {
  if (poles.some(({ re }) => !(re < 0)))
    throw new ProblemError('value-out-of-range', 'A pole lies outside the left half plane; sections need stable poles.')
  const sections: Section[] = poles
    .filter(({ im }) => im > 0)
    .map(({ re, im }) => ({
      order: 2,
      omega0: Math.hypot(re, im),
      q: Math.hypot(re, im) / (-2 * re),
      zerosAtOrigin: 0,
    }))
  const real = poles
    .filter(({ im }) => im === 0)
    .map(({ re }) => -re)
    .sort((a, b) => a - b)
  while (real.length > 1) {
    const [small, large] = [real.shift()!, real.pop()!]
    const omega0 = Math.sqrt(small) * Math.sqrt(large)
    sections.push({ order: 2, omega0, q: omega0 / (small + large), zerosAtOrigin: 0 })
  }
  if (real.length) sections.push({ order: 1, omega0: real[0]!, zerosAtOrigin: 0 })
  return pairZeros(sections.sort(byQ), zeros)
}

/**
 * Gives zeros to sections so that the dynamic range of each is kept: beginning at the highest Q, each second-order
 * section takes the pair on the axis that is nearest in ratio to its poles; zeros at the origin are then spread over
 * the others, one each before any gets a second.
 *
 * @param sections without zeros
 * @param zeros at the origin, or on the imaginary axis in conjugate pairs
 * @returns the sections in the order given
 * @throws {ProblemError} 'value-out-of-range' when a zero lies elsewhere or finds no section
 * Source: E. Lueder, Bell Syst. Tech. J. 49 (1970) 23, from memory, for the rule; common practice for the origin.
 */
export function pairZeros(sections: readonly Section[], zeros: readonly Complex[]): Section[] {
  const offAxis = zeros.find(({ re, im }) => Math.abs(re) > HALF_PLANE * Math.hypot(re, im))
  if (offAxis)
    throw new ProblemError(
      'value-out-of-range',
      `A zero at ${offAxis.re} + ${offAxis.im}j is not on the imaginary axis.`,
    )
  const paired = sections.map((section) => ({ ...section }))
  const onAxis = zeros.filter(({ im }) => im > 0).map(({ im }) => im)
  let origin = zeros.filter(({ im }) => im === 0).length
  for (const section of [...paired].sort(byQ).reverse()) {
    if (section.order === 1 || onAxis.length === 0) continue
    const distance = (omegaZ: number) => Math.abs(Math.log(omegaZ / section.omega0))
    const nearest = onAxis.reduce((best, omegaZ, i) => (distance(omegaZ) < distance(onAxis[best]!) ? i : best), 0)
    section.omegaZ = onAxis.splice(nearest, 1)[0]!
  }
  for (const round of [1, 2] as const)
    for (const section of paired) {
      if (origin === 0) break
      if (section.order === 1 ? round === 2 : section.omegaZ !== undefined) continue
      Object.assign(section, { zerosAtOrigin: round })
      origin--
    }
  if (onAxis.length || origin)
    throw new ProblemError('value-out-of-range', 'There are more zeros than the sections can take.')
  return paired
}

const byQ = (a: Section, b: Section) => {
  const [qa, qb] = [a.order === 1 ? 0 : a.q, b.order === 1 ? 0 : b.q]
  return qa - qb || a.omega0 - b.omega0
}

/**
 * Magnitude of a section as defined at `Section`.
 * @param radPerSec ω, rad/s
 */
export function sectionMagnitude(section: Section, radPerSec: number): number {
  const { omega0, zerosAtOrigin } = section
  if (section.order === 1) return radPerSec ** zerosAtOrigin / Math.hypot(radPerSec, omega0)
  const squares = (omega0 - radPerSec) * (omega0 + radPerSec)
  const { omegaZ } = section
  const numerator =
    omegaZ === undefined ? radPerSec ** zerosAtOrigin : Math.abs((omegaZ - radPerSec) * (omegaZ + radPerSec))
  return numerator / Math.hypot(squares, (radPerSec * omega0) / section.q)
}
