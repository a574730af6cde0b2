import { ProblemError } from '../problems'
import { shiftDecimal } from '../quantities/decimal-text'
import type { SeriesName } from './series'
import { SERIES_DIGITS } from './series'

/** Two values nearer than this are the same preferred value: 4.7·1e-9 and 4.7e-9 are different doubles. */
const SLACK = 1e-12

/** A preferred value by its place: whole decades from place 0 = 1, the double nearest to its decimal text. */
function valueAt(series: SeriesName, place: number): number {
  const { digits, decade } = SERIES_DIGITS[series]
  const row = Math.floor(place / digits.length)
  return Number(`${digits[place - row * digits.length]!}e${row - decade}`)
}

/** Place of the largest preferred value that is not above x. */
function placeBelow(x: number, series: SeriesName): number {
  if (!(x > 0 && Number.isFinite(x)))
    throw new ProblemError('value-not-positive', `${x} has no preferred value beside it; one above zero has.`)
  const count = SERIES_DIGITS[series].digits.length
  let place = Math.floor(Math.log10(x) * count)
  // At the end of the doubles the slack must not reach infinity, or the search would never end.
  const limit = Math.min(x * (1 + SLACK), Number.MAX_VALUE)
  while (valueAt(series, place) > limit) place--
  while (valueAt(series, place + 1) <= limit) place++
  return place
}

/**
 * Largest preferred value ≤ x; x itself where it is preferred.
 * @param x in any unit, > 0
 * @throws {ProblemError} 'value-not-positive' when x is not above zero or not finite; so do the others here
 * @example nextDown(5000, 'E12') // 4700
 */
export const nextDown = (x: number, series: SeriesName): number => valueAt(series, placeBelow(x, series))

/**
 * Smallest preferred value ≥ x; x itself where it is preferred.
 * @param x in any unit, > 0
 * @example nextUp(5000, 'E12') // 5600
 */
export function nextUp(x: number, series: SeriesName): number {
  const place = placeBelow(x, series)
  return same(valueAt(series, place), x) ? valueAt(series, place) : valueAt(series, place + 1)
}

/**
 * Preferred value nearest in ratio: smallest |ln(v/x)|.
 * @example nearestPreferred(5000, 'E12') // 4700
 * Source: IEC 60063:2015 (values); nearest in ratio is common practice.
 */
export function nearestPreferred(x: number, series: SeriesName): number {
  const down = nextDown(x, series)
  const up = nextUp(x, series)
  return x / down <= up / x ? down : up
}

/**
 * The neighbour of a value in its series, never the value itself; one between two goes to that in the direction.
 * @example stepPreferred(44_200, 'E96', 1) // 45300
 */
export function stepPreferred(x: number, series: SeriesName, direction: 1 | -1): number {
  const place = placeBelow(x, series)
  if (direction === 1) return valueAt(series, place + 1)
  return same(valueAt(series, place), x) ? valueAt(series, place - 1) : valueAt(series, place)
}

/**
 * Ten times, or a tenth of, a value, with the same digits.
 * @example stepDecade(4.7e-9, 1) // 4.7e-8
 */
export function stepDecade(x: number, direction: 1 | -1): number {
  return shiftDecimal(x, direction)
}

/** True for a value of the series; false for zero, negative and infinite ones. */
export const isPreferred = (x: number, series: SeriesName): boolean =>
  x > 0 && Number.isFinite(x) && same(nextDown(x, series), x)

/**
 * Preferred values from … to, both included, ascending.
 * @param from > 0
 * @param to > 0, finite; below `from` there is nothing
 * @example preferredBetween(1e-9, 4e-9, 'E6') // [1e-9, 1.5e-9, 2.2e-9, 3.3e-9]
 */
export function preferredBetween(from: number, to: number, series: SeriesName): number[] {
  const first = placeBelow(from, series)
  const start = same(valueAt(series, first), from) ? first : first + 1
  const last = placeBelow(to, series)
  return Array.from({ length: Math.max(0, last - start + 1) }, (_, k) => valueAt(series, start + k))
}

const same = (a: number, b: number) => Math.abs(a - b) <= SLACK * Math.abs(b)
