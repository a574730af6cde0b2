import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ProblemError } from '#shared/problems'
import {
  isPreferred,
  nearestPreferred,
  nextDown,
  nextUp,
  preferredBetween,
  stepDecade,
  stepPreferred,
} from '#shared/preferred-values/lookup'
import { SERIES, SERIES_NAMES } from '#shared/preferred-values/series'

const series = fc.constantFrom(...SERIES_NAMES)
const positive = fc.double({ min: 1e-15, max: 1e12, noNaN: true })

/** The published decade around x and its neighbours, straight from the table. */
const table = (x: number, name: (typeof SERIES_NAMES)[number]) => {
  const decade = Math.floor(Math.log10(x))
  return [-1, 0, 1].flatMap((shift) => SERIES[name].map((v) => Number(`${v}e${decade + shift}`)))
}

// Source: IEC 60063:2015 through SERIES, which series.test.ts holds against the published lists.
describe('look-ups in the preferred series', () => {
  it('find what a search through the whole table finds', () => {
    fc.assert(
      fc.property(positive, series, (x, name) => {
        const values = table(x, name)
        expect(nextUp(x, name)).toBe(values.find((v) => v >= x * (1 - 1e-12)))
        expect(nextDown(x, name)).toBe(values.findLast((v) => v <= x * (1 + 1e-12)))
        const distance = (v: number) => Math.abs(Math.log(v / x))
        const least = Math.min(...values.map(distance))
        expect(distance(nearestPreferred(x, name))).toAgreeWith(least, { absolute: 1e-15 })
      }),
      { numRuns: 2000, seed: 60063 },
    )
  })

  it('measure nearness by ratio, not by difference', () => {
    // √(1 · 2.2) = 1.4832, the arithmetic mean 1.6.
    expect(nearestPreferred(1.48, 'E3')).toBe(1)
    expect(nearestPreferred(1.49, 'E3')).toBe(2.2)
  })

  it('take a value that arithmetic left in the last digit for the value itself', () => {
    expect(4.7 * 1e-9).not.toBe(4.7e-9)
    for (const look of [nearestPreferred, nextUp, nextDown]) expect(look(4.7 * 1e-9, 'E12')).toBe(4.7e-9)
    expect(isPreferred(4.7 * 1e-9, 'E12')).toBe(true)
    expect(stepPreferred(4.7 * 1e-9, 'E12', 1)).toBe(5.6e-9)
    expect(stepPreferred(4.7 * 1e-9, 'E12', -1)).toBe(3.9e-9)
  })

  it('step strictly, and back to where they came from', () => {
    fc.assert(
      fc.property(positive, series, (x, name) => {
        const up = stepPreferred(x, name, 1)
        const down = stepPreferred(x, name, -1)
        expect(up).toBeGreaterThan(x)
        expect(down).toBeLessThan(x)
        expect(stepPreferred(nextDown(x, name), name, 1)).toBe(isPreferred(x, name) ? up : nextUp(x, name))
        expect(stepPreferred(up, name, -1)).toBe(nextDown(x, name))
      }),
      { seed: 12 },
    )
  })

  it('pass from decade to decade', () => {
    expect(stepPreferred(9.76, 'E96', 1)).toBe(10)
    expect(stepPreferred(1000, 'E24', -1)).toBe(910)
    expect(stepPreferred(8.2e-9, 'E12', 1)).toBe(1e-8)
    expect(stepPreferred(919, 'E192', 1)).toBe(920)
  })

  it('know the members of a series from the rest', () => {
    expect(isPreferred(4700, 'E3')).toBe(true)
    expect(isPreferred(44_200, 'E96')).toBe(true)
    expect(isPreferred(44_200, 'E24')).toBe(false)
    expect(isPreferred(9.19, 'E192')).toBe(false)
    for (const x of [0, -4700, NaN, Infinity, -Infinity]) expect(isPreferred(x, 'E12')).toBe(false)
  })

  it('keep the digits over a step of a decade', () => {
    expect(stepDecade(4.7e-9, 1)).toBe(4.7e-8)
    expect(stepDecade(4.7e-9, -1)).toBe(4.7e-10)
    expect(stepDecade(12_345, -1)).toBe(1234.5)
  })

  it('list a range with both ends, ascending, as the doubles of the decimal texts', () => {
    expect(preferredBetween(1e-9, 4e-9, 'E6')).toEqual([1e-9, 1.5e-9, 2.2e-9, 3.3e-9])
    expect(preferredBetween(10, 1e6, 'E96')).toHaveLength(5 * 96 + 1)
    expect(preferredBetween(5000, 5500, 'E12')).toEqual([])
    expect(preferredBetween(10, 1, 'E12')).toEqual([])
    for (const name of SERIES_NAMES) {
      const values = preferredBetween(1e-12, 1e7, name)
      expect(values).toHaveLength(19 * SERIES[name].length + 1)
      expect(values.every((v, k) => k === 0 || v > values[k - 1]!)).toBe(true)
      // The shortest decimal text of an exact double has no more digits than the series.
      expect(values.every((v) => v.toExponential().split('e')[0]!.length <= 4)).toBe(true)
    }
  })

  it.each([0, -1, NaN, Infinity, -Infinity])('refuse %d', (x) => {
    for (const look of [nearestPreferred, nextUp, nextDown])
      expect(() => look(x, 'E12')).toThrowError(expect.objectContaining({ code: 'value-not-positive' }))
    expect(() => stepPreferred(x, 'E12', 1)).toThrowError(ProblemError)
    expect(() => preferredBetween(x, 1, 'E12')).toThrowError(ProblemError)
  })

  it('end at the ends of the doubles', () => {
    for (const x of [5e-324, 1e-310, 1e300, Number.MAX_VALUE])
      for (const name of SERIES_NAMES) expect(nearestPreferred(x, name)).not.toBeNaN()
  })
})
