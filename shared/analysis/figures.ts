import { bracketedRoot } from '../numerics/brent'
import { gainAt } from './rational'
import type { RationalTransferFunction } from './rational'
import { criticalPoints, magnitudeAt } from './magnitude'
import type { CriticalPoint } from './magnitude'

export { gainAt }

/** What the reference of a response is taken from. */
export type BandKind = 'low-pass' | 'high-pass' | 'band-pass' | 'band-stop'

/** Frequencies at which a response leaves its pass band; what is left out does not exist. */
export interface BandEdges {
  lowerHz?: number
  upperHz?: number
  /** Gain that the edges are relative to, V/V, without sign. */
  reference: number
}

/** An extremum that is no rounding of a flat response. */
const VISIBLE = 1e-9

/** Kind of pass band by the limits: |H| at 0 Hz and at high frequency. */
export function bandKind(h: RationalTransferFunction): BandKind {
  const low = gainAtZero(h)
  const high = Math.abs(gainAtHighFrequency(h))
  if (low === 0 && high === 0) return 'band-pass'
  if (low === 0) return 'high-pass'
  if (high === 0) return 'low-pass'
  const dip = Math.min(...criticalPoints(h).map((point) => point.gain))
  if (dip < Math.min(low, high) / Math.SQRT2) return 'band-stop'
  return high > low ? 'high-pass' : 'low-pass'
}

/**
 * Half-power (−3 dB) frequencies: where |H| = reference/√2. The reference is |H| at 0 Hz for a low-pass and a
 * band-stop, the limit at high frequency for a high-pass, the peak for a band-pass. Of a low-pass it is the last such
 * frequency, of a high-pass the first, of a band-pass the nearest on each side of the peak, of a band-stop the first
 * and the last.
 *
 * @param kind by the limits of the response when left out
 * @returns null when the response has no such reference (zero or infinite)
 */
export function halfPower(h: RationalTransferFunction, kind: BandKind = bandKind(h)): BandEdges | null {
  return edgesAt(h, kind, Math.SQRT1_2, referenceOf(h, kind))
}

/**
 * Edges of the band in which |H| stays within a ripple: the last frequency (first for a high-pass) at which it is the
 * given decibels below the largest gain in the pass band. That is the reference gain itself unless the response peaks.
 *
 * @param rippleDb dB, > 0
 */
export function rippleEdge(
  h: RationalTransferFunction,
  rippleDb: number,
  kind: BandKind = bandKind(h),
): BandEdges | null {
  const top = Math.max(referenceOf(h, kind), kind === 'band-stop' ? 0 : (peak(h)?.gain ?? 0))
  return edgesAt(h, kind, 10 ** (-rippleDb / 20), top)
}

/** Largest |H| where it lies above both limits, else null. */
export function peak(h: RationalTransferFunction): { frequencyHz: number; gain: number } | null {
  const limits = Math.max(gainAtZero(h), Math.abs(gainAtHighFrequency(h)))
  const top = criticalPoints(h).reduce<CriticalPoint | null>((a, b) => (a && a.gain >= b.gain ? a : b), null)
  return top && top.gain > limits * (1 + VISIBLE) ? { frequencyHz: top.frequencyHz, gain: top.gain } : null
}

/**
 * Deepest dip of |H| between two higher places, null where there is none.
 * @returns its frequency and its depth: |H| there over the reference gain, 0 for a perfect notch
 */
export function notch(
  h: RationalTransferFunction,
  kind: BandKind = bandKind(h),
): { frequencyHz: number; depth: number } | null {
  const points = criticalPoints(h)
  const gains = [gainAtZero(h), ...points.map(({ gain }) => gain), Math.abs(gainAtHighFrequency(h))]
  const dips = points.filter((point, k) => {
    const before = Math.max(...gains.slice(0, k + 1))
    const after = Math.max(...gains.slice(k + 2))
    return point.gain < Math.min(before, after) * (1 - VISIBLE) && point.gain <= Math.min(gains[k]!, gains[k + 2]!)
  })
  if (dips.length === 0) return null
  const deepest = dips.reduce((a, b) => (b.gain < a.gain ? b : a))
  return { frequencyHz: deepest.frequencyHz, depth: deepest.gain / referenceOf(h, kind) }
}

/** |H| at 0 Hz; infinite for an integrator. */
export const gainAtZero = (h: RationalTransferFunction): number => magnitudeAt(h, 0)

/** Limit of H at high frequency, with its sign when it is a constant; infinite where it grows for ever. */
export function gainAtHighFrequency({ poles, zeros, gain }: RationalTransferFunction): number {
  if (gain === 0 || poles.length > zeros.length) return 0
  return poles.length === zeros.length ? gain : gain < 0 ? -Infinity : Infinity
}

/** Gain that edges and rejection are relative to, V/V, without sign. */
export function referenceOf(h: RationalTransferFunction, kind: BandKind): number {
  if (kind === 'high-pass') return Math.abs(gainAtHighFrequency(h))
  if (kind === 'band-pass') return peak(h)?.gain ?? Math.max(gainAtZero(h), Math.abs(gainAtHighFrequency(h)))
  return gainAtZero(h)
}

function edgesAt(h: RationalTransferFunction, kind: BandKind, share: number, reference: number): BandEdges | null {
  if (!(reference > 0) || !Number.isFinite(reference)) return null
  const crossings = crossingsOf(h, reference * share)
  const rising = crossings.filter((one) => one.rising).map((one) => one.frequencyHz)
  const falling = crossings.filter((one) => !one.rising).map((one) => one.frequencyHz)
  const top = kind === 'band-pass' ? (peak(h)?.frequencyHz ?? 0) : 0
  const [lowerHz, upperHz] = {
    'low-pass': [undefined, falling.at(-1)],
    'high-pass': [rising[0], undefined],
    'band-pass': [rising.findLast((f) => f < top), falling.find((f) => f > top)],
    'band-stop': [falling[0], rising.at(-1)],
  }[kind]
  return { ...(lowerHz === undefined ? {} : { lowerHz }), ...(upperHz === undefined ? {} : { upperHz }), reference }
}

/** All frequencies at which |H| passes a level, ascending: one at most between two extrema. */
function crossingsOf(h: RationalTransferFunction, level: number): { frequencyHz: number; rising: boolean }[] {
  const points = criticalPoints(h)
  const limitLow = gainAtZero(h)
  const limitHigh = Math.abs(gainAtHighFrequency(h))
  const roots = [...h.poles, ...h.zeros].map(({ re, im }) => Math.hypot(re, im)).filter((size) => size > 0)
  const anyHz = (roots.length ? Math.max(...roots) : 1) / (2 * Math.PI)
  const above = (frequencyHz: number) => Math.log(magnitudeAt(h, frequencyHz) / level)
  const knots = [{ frequencyHz: 0, gain: limitLow }, ...points, { frequencyHz: Infinity, gain: limitHigh }]
  const found: { frequencyHz: number; rising: boolean }[] = []
  for (let k = 1; k < knots.length; k++) {
    const [from, to] = [knots[k - 1]!, knots[k]!]
    if (from.gain > level === to.gain > level || from.gain === to.gain) continue
    const rising = to.gain > from.gain
    let lowHz = from.frequencyHz
    let highHz = to.frequencyHz
    if (highHz === Infinity) highHz = reach(above, Math.max(lowHz, anyHz), 8, rising)
    if (lowHz === 0) lowHz = reach(above, Math.min(highHz, anyHz), 1 / 8, !rising)
    const frequencyHz = bracketedRoot((x) => bounded(above(Math.exp(x))), Math.log(lowHz), Math.log(highHz))
    if (!Number.isNaN(frequencyHz)) found.push({ frequencyHz: Math.exp(frequencyHz), rising })
  }
  return found
}

/** Steps away from a frequency by a factor, at least once, until the response is on the wanted side of the level. */
function reach(above: (frequencyHz: number) => number, fromHz: number, factor: number, wanted: boolean): number {
  let frequencyHz = fromHz * factor
  for (let round = 0; round < 100 && above(frequencyHz) > 0 !== wanted; round++) frequencyHz *= factor
  return frequencyHz
}

const bounded = (x: number) => Math.max(-700, Math.min(700, x))
