import type { RationalTransferFunction } from './rational'

const POINTS_PER_DECADE = 60
const SAMPLES_PER_PERIOD = 16
const PERIODS = 48
/** The search starts at this share of the fastest time constant and ends after so many of the slowest. */
const FIRST = 1e-3
const LAST = 36

/**
 * Times at which a response in time is sampled in search of its extremes and crossings: evenly in log t from far below
 * the fastest time constant until all has died away, and evenly in t over the first periods of each pole pair.
 *
 * @param h all its poles in the left half plane
 * @returns s, ascending, from 0
 */
export function stepTimes({ poles }: RationalTransferFunction): Float64Array {
  if (poles.length === 0) return Float64Array.of(0)
  const fastest = FIRST / Math.max(...poles.map(({ re, im }) => Math.hypot(re, im)))
  const slowest = LAST / Math.min(...poles.map(({ re }) => Math.abs(re)))
  const times = [0]
  const count = Math.ceil(Math.log10(slowest / fastest) * POINTS_PER_DECADE)
  for (let k = 0; k <= count; k++) times.push(fastest * (slowest / fastest) ** (k / count))
  for (const { im } of poles) {
    if (im <= 0) continue
    const between = (2 * Math.PI) / im / SAMPLES_PER_PERIOD
    for (let k = 1; k <= PERIODS * SAMPLES_PER_PERIOD && k * between < slowest; k++) times.push(k * between)
  }
  return Float64Array.from(new Set(times)).sort()
}
