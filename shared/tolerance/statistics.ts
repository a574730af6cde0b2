import { selectAllInPlace } from '../numerics/select'

export const PERCENTILES = [1, 5, 50, 95, 99] as const
export type Percentile = (typeof PERCENTILES)[number]

/** Counts over equal intervals; a value on an edge belongs to the interval above, the greatest to the last. */
export interface Histogram {
  from: number
  to: number
  counts: number[]
}

export interface SampleStatistics {
  mean: number
  /** With n − 1; 0 for one build. */
  standardDeviation: number
  percentiles: Record<Percentile, number>
  sampledMin: number
  sampledMax: number
  histogram: Histogram
  /** Builds in which the figure is not defined; they count in no other field. */
  undefinedBuilds: number
}

export const HISTOGRAM_BINS = 40

/** Statistics of one figure over all builds; NaN throughout when it is defined in none. */
export function sampleStatistics(samples: Float64Array, bins = HISTOGRAM_BINS): SampleStatistics {
  const sorted = samples.filter(Number.isFinite).sort()
  const count = sorted.length
  // Relative to one of the values, so that a small spread on a large figure loses no digits.
  const origin = sorted[0] ?? NaN
  const mean = origin + sorted.reduce((sum, x) => sum + (x - origin), 0) / count
  const squares = sorted.reduce((sum, x) => sum + (x - mean) ** 2, 0)
  return {
    mean,
    standardDeviation: count > 1 ? Math.sqrt(squares / (count - 1)) : count === 1 ? 0 : NaN,
    percentiles: percentilesOf(sorted),
    sampledMin: origin,
    sampledMax: sorted.at(-1) ?? NaN,
    histogram: histogramOf(sorted, bins),
    undefinedBuilds: samples.length - count,
  }
}

export const percentilesOf = (sorted: Float64Array): Record<Percentile, number> =>
  Object.fromEntries(PERCENTILES.map((p) => [p, percentileOf(sorted, p)])) as Record<Percentile, number>

/**
 * A percentile, linear between order statistics.
 * @param sorted ascending
 * @param percent 0 … 100
 * Source: definition 7 of R. J. Hyndman, Y. Fan, Am. Stat. 50 (1996) 361.
 */
export function percentileOf(sorted: Float64Array, percent: number): number {
  const place = (percent / 100) * (sorted.length - 1)
  const below = Math.floor(place)
  const [a, b] = [sorted[below] ?? NaN, sorted[Math.min(below + 1, sorted.length - 1)] ?? NaN]
  return a === b || place === below ? a : a + (b - a) * (place - below)
}

/**
 * The same percentiles without sorting everything.
 * @param values NaN are left out; reordered in place
 */
export function percentilesInPlace(values: Float64Array): Record<Percentile, number> {
  let count = 0
  for (const value of values) if (!Number.isNaN(value)) values[count++] = value
  const kept = values.subarray(0, count)
  const places = PERCENTILES.flatMap((percent) => {
    const below = Math.floor((percent / 100) * (count - 1))
    return [below, Math.min(below + 1, count - 1)]
  })
  if (count > 0) selectAllInPlace(kept, places)
  return percentilesOf(kept)
}

function histogramOf(sorted: Float64Array, bins: number): Histogram {
  const [from, to] = [sorted[0] ?? NaN, sorted.at(-1) ?? NaN]
  const counts = new Array<number>(bins).fill(0)
  const scale = to > from ? bins / (to - from) : 0
  for (const x of sorted) counts[Math.min(bins - 1, Math.floor((x - from) * scale))]!++
  return { from, to, counts }
}
