import { describe, expect, it } from 'vitest'
import checks from '../../checks/preferred-values.json'
import { nearestPreferred, nextDown, nextUp, preferredBetween, stepPreferred } from '#shared/preferred-values/lookup'
import type { SeriesName } from '#shared/preferred-values/series'
import { SERIES, SERIES_NAMES } from '#shared/preferred-values/series'

// Source: IEC 60063:2015, see the header of tests/checks/preferred-values.json.
describe('preferred values', () => {
  it.each(SERIES_NAMES)('holds %s exactly as published', (name) => {
    expect(SERIES[name]).toEqual(checks.series[name])
    expect(SERIES[name]).toHaveLength(checks.counts[name])
  })

  it.each(checks.lookups)('looks $x up in $series', (row) => {
    const series = row.series as SeriesName
    expect(nearestPreferred(row.x, series)).toAgreeWith(row.nearest_in_ratio, { relative: 1e-9 })
    expect(nextUp(row.x, series)).toAgreeWith(row.next_up, { relative: 1e-9 })
    expect(nextDown(row.x, series)).toAgreeWith(row.next_down, { relative: 1e-9 })
  })

  it('gives the doubles that the decimal texts have, so that values compare equal', () => {
    expect(preferredBetween(1e-9, 10e-9, 'E6')).toEqual([1e-9, 1.5e-9, 2.2e-9, 3.3e-9, 4.7e-9, 6.8e-9, 1e-8])
    expect(preferredBetween(4.7 * 1e-9, 4.7 * 1e-9, 'E12')).toEqual([4.7e-9])
  })

  it('steps strictly, from a value in between to its neighbour', () => {
    expect(stepPreferred(44_200, 'E96', 1)).toBe(45_300)
    expect(stepPreferred(44_200, 'E96', -1)).toBe(43_200)
    expect(stepPreferred(44_000, 'E96', 1)).toBe(44_200)
    expect(stepPreferred(44_000, 'E96', -1)).toBe(43_200)
    expect(stepPreferred(1e-9, 'E12', -1)).toBe(820e-12)
  })
})
