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
  const count = SERIES_DIGITS[series].digits.length
  let place = Math.floor(Math.log10(x) * count)
  while (valueAt(series, place) > x * (1 + SLACK)) place--
  while (valueAt(series, place + 1) <= x * (1 + SLACK)) place++
  return place
}

/** Largest preferred value ≤ x; x itself where it is preferred. @param x > 0 */
export const nextDown = (x: number, series: SeriesName): number => valueAt(series, placeBelow(x, series))

/** Smallest preferred value ≥ x; x itself where it is preferred. @param x > 0 */
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

/** The neighbour of a value in its series; a value between two goes to the one in that direction. */
export function stepPreferred(x: number, series: SeriesName, direction: 1 | -1): number {
  const place = placeBelow(x, series)
  if (direction === 1) return valueAt(series, place + 1)
  return same(valueAt(series, place), x) ? valueAt(series, place - 1) : valueAt(series, place)
}

/** Ten times, or a tenth of, a value, with the same digits. */
export function stepDecade(x: number, direction: 1 | -1): number {
  const [mantissa = '1', exponent = '0'] = x.toExponential().split('e')
  return Number(`${mantissa}e${Number(exponent) + direction}`)
}

export const isPreferred = (x: number, series: SeriesName): boolean => x > 0 && same(nextDown(x, series), x)

/** Preferred values from … to, both included, ascending. */
export function preferredBetween(from: number, to: number, series: SeriesName): number[] {
  const first = placeBelow(from, series)
  const start = same(valueAt(series, first), from) ? first : first + 1
  const last = placeBelow(to, series)
  return Array.from({ length: Math.max(0, last - start + 1) }, (_, k) => valueAt(series, start + k))
}

const same = (a: number, b: number) => Math.abs(a - b) <= SLACK * Math.abs(b)
