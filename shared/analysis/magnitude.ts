import type { Complex } from '../numerics/complex'
import { bracketedRoot } from '../numerics/brent'
import type { RationalTransferFunction } from './rational'

/** A place where |H| is least or greatest in its neighbourhood, or stays level. */
export interface CriticalPoint {
  frequencyHz: number
  gain: number
}

const POINTS_PER_DECADE = 12
const DECADES_AROUND = 4
/** Offsets from a root's own frequency, in units of its distance from the axis, at which the grid is refined. */
const AROUND_ROOT = [-30, -10, -3, -1, -0.3, 0, 0.3, 1, 3, 10, 30]

/** |H| at a frequency, from poles and zeros; infinite at a pole. */
export function magnitudeAt({ poles, zeros, gain }: RationalTransferFunction, frequencyHz: number): number {
  const w = 2 * Math.PI * frequencyHz
  let size = Math.abs(gain)
  if (size === 0) return 0
  const count = Math.max(poles.length, zeros.length)
  for (let k = 0; k < count; k++) {
    const [p, z] = [poles[k], zeros[k]]
    if (p) size /= Math.sqrt(p.re * p.re + (w - p.im) ** 2)
    if (z) size *= Math.sqrt(z.re * z.re + (w - z.im) ** 2)
  }
  return Number.isNaN(size) ? Infinity : size
}

/** d ln|H|/d ln ω; each root with its conjugate, so that nothing cancels at low frequency. */
function slopeAt({ poles, zeros }: RationalTransferFunction, w: number): number {
  let slope = 0
  for (const zero of zeros) slope += rootSlope(zero, w)
  for (const pole of poles) slope -= rootSlope(pole, w)
  return slope
}

/** Half of what a pair gives for one of the pair; all of what a real root gives. */
function rootSlope({ re, im }: Complex, w: number): number {
  const x = w * w
  if (im === 0) return x / (re * re + x)
  const size = re * re + im * im
  const difference = (Math.sqrt(size) - w) * (Math.sqrt(size) + w)
  return (x * (2 * re * re - difference)) / (difference * difference + 4 * re * re * x)
}

const known = new WeakMap<RationalTransferFunction, CriticalPoint[]>()

/**
 * All extrema of |H| above 0 Hz, ascending; between two of them |H| rises or falls throughout. They are the zeros of
 * its slope, searched on a grid that is refined around each pole and zero by that root's own width, so that no peak or
 * notch is too narrow to be seen. Zeros and poles on the axis are extrema exactly.
 */
export function criticalPoints(h: RationalTransferFunction): CriticalPoint[] {
  const kept = known.get(h)
  if (kept) return kept
  const onAxis = new Set([...h.poles, ...h.zeros].filter(({ re, im }) => re === 0 && im > 0).map(({ im }) => im))
  const found = [...onAxis]
  const grid = searchGrid(h)
  let before = NaN
  let slope = NaN
  for (const w of grid) {
    if (onAxis.has(w)) {
      slope = NaN
      before = w
      continue
    }
    const here = slopeAt(h, w)
    if (here === 0) found.push(w)
    else if (slope > 0 !== here > 0 && slope !== 0 && !Number.isNaN(slope))
      found.push(Math.exp(bracketedRoot((x) => slopeAt(h, Math.exp(x)), Math.log(before), Math.log(w))))
    before = w
    slope = here
  }
  const points = found
    .filter((w) => Number.isFinite(w))
    .sort((a, b) => a - b)
    .map((w) => ({
      frequencyHz: w / (2 * Math.PI),
      gain: onAxis.has(w) ? axisGain(h, w) : magnitudeAt(h, w / (2 * Math.PI)),
    }))
  known.set(h, points)
  return points
}

const axisGain = ({ zeros }: RationalTransferFunction, w: number) =>
  zeros.some(({ re, im }) => re === 0 && im === w) ? 0 : Infinity

function searchGrid({ poles, zeros }: RationalTransferFunction): Float64Array {
  const roots = [...poles, ...zeros].filter(({ re, im }) => (re !== 0 || im !== 0) && im >= 0)
  if (roots.length === 0) return new Float64Array(0)
  const sizes = roots.map(({ re, im }) => Math.hypot(re, im))
  const from = Math.min(...sizes) / 10 ** DECADES_AROUND
  const decades = Math.log10(Math.max(...sizes) / from) + DECADES_AROUND
  const grid: number[] = []
  for (let k = 0; k <= decades * POINTS_PER_DECADE; k++) grid.push(from * 10 ** (k / POINTS_PER_DECADE))
  roots.forEach(({ re, im }, k) => {
    const centre = im > 0 ? im : sizes[k]!
    const width = re === 0 ? 1e-6 * im : Math.abs(re)
    for (const offset of AROUND_ROOT) grid.push(centre + offset * width)
    grid.push(sizes[k]!)
  })
  return Float64Array.from(grid.filter((w) => w > 0)).sort()
}
