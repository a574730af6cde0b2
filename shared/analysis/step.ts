import { bracketedRoot } from '../numerics/brent'
import { gainAtHighFrequency } from './figures'
import type { Modes } from './partial-fractions'
import { modesAt, modesOf } from './partial-fractions'
import type { RationalTransferFunction } from './rational'
import { gainAt } from './rational'
import { stepTimes } from './step-times'

/** What is read off a step response; null where there is no such figure. */
export interface StepFigures {
  /** Just after the step, t = 0+, V. */
  startVolt: number
  /** Limit for t → ∞, V; null unless every pole lies in the left half plane. */
  finalVolt: number | null
  /** Value farthest from 0 and when; at Infinity where the response only tends to it. Null without a limit. */
  extreme: { volt: number; timeSec: number } | null
  /** From first reaching 10 % of the final value to first reaching 90 %, s; null where the final value is 0. */
  riseTimeSec: number | null
  /** Excess over the final value, as a fraction of it; 0 when it is never passed, null where the final value is 0. */
  overshoot: number | null
}

/** An excess that is no rounding of a response that tends to its limit. */
const VISIBLE = 1e-9

/**
 * Step response: output for an input of 0 V before and 1 V after t = 0, all capacitors empty, by partial fractions of
 * H(s)/s.
 *
 * @param timesSec s; 0 stands for 0+, the output being 0 V before
 * @returns V, shape [n]; where H grows with frequency, without the impulse at t = 0
 */
export function stepResponse(h: RationalTransferFunction, timesSec: ArrayLike<number>): Float64Array {
  const modes = modesOf(h, 1)
  return Float64Array.from(timesSec, (t) => (t < 0 ? 0 : t === 0 ? startOf(h, modes) : modesAt(modes, t)))
}

/**
 * Impulse response: output for an input impulse of 1 V·s at t = 0, by partial fractions of H(s).
 *
 * @param timesSec s; 0 stands for 0+, the output being 0 V before
 * @returns V/(V·s) = 1/s, shape [n], without the impulse at t = 0 itself, whose weight is `impulseWeight`
 */
export function impulseResponse(h: RationalTransferFunction, timesSec: ArrayLike<number>): Float64Array {
  const modes = modesOf(h)
  return Float64Array.from(timesSec, (t) => (t < 0 ? 0 : modesAt(modes, t)))
}

/** Part of an input impulse that comes through at t = 0, V/V: the limit of H at high frequency. */
export const impulseWeight = (h: RationalTransferFunction): number => gainAtHighFrequency(h)

/** Start, limit, extreme, rise time and overshoot of a step response. */
export function stepFigures(h: RationalTransferFunction): StepFigures {
  const modes = modesOf(h, 1)
  const startVolt = startOf(h, modes)
  if (h.poles.some(({ re }) => re >= 0))
    return { startVolt, finalVolt: null, extreme: null, riseTimeSec: null, overshoot: null }
  const finalVolt = gainAt(h, 0).re + 0
  const times = stepTimes(h)
  const at = (t: number) => (t === 0 ? startVolt : modesAt(modes, t))
  const volts = Float64Array.from(times, at)
  const slope = modesOf(h)
  const farthest = highest(times, volts, slope, (volt) => Math.abs(volt), at)
  const extreme =
    Math.abs(farthest.volt) > Math.abs(finalVolt) * (1 + VISIBLE) ? farthest : { volt: finalVolt, timeSec: Infinity }
  if (finalVolt === 0) return { startVolt, finalVolt, extreme, riseTimeSec: null, overshoot: null }
  const top = highest(times, volts, slope, (volt) => volt / finalVolt, at).volt / finalVolt
  const reaches = (share: number) => firstAt(times, volts, share * finalVolt, finalVolt, at)
  return {
    startVolt,
    finalVolt,
    extreme,
    riseTimeSec: reaches(0.9) - reaches(0.1),
    overshoot: top > 1 + VISIBLE ? top - 1 : 0,
  }
}

/** Limit for t → 0+: that of H at high frequency where it has one. */
const startOf = (h: RationalTransferFunction, modes: Modes): number =>
  h.zeros.length > h.poles.length ? modesAt(modes, 0) : gainAtHighFrequency(h)

/** Place where a measure of the response is largest: the best sample, then the zero of the slope beside it. */
function highest(
  times: Float64Array,
  volts: Float64Array,
  slope: Modes,
  measure: (volt: number) => number,
  at: (timeSec: number) => number,
): { volt: number; timeSec: number } {
  const best = volts.reduce((most, volt, k) => (measure(volt) > measure(volts[most]!) ? k : most), 0)
  const sample = { volt: volts[best]!, timeSec: times[best]! }
  if (best === 0 || best === times.length - 1) return sample
  const timeSec = bracketedRoot((t) => modesAt(slope, t), times[best - 1]!, times[best + 1]!)
  if (Number.isNaN(timeSec)) return sample
  const volt = at(timeSec)
  return measure(volt) >= measure(sample.volt) ? { volt, timeSec } : sample
}

/** First time at which the response has come as far as a level on its way to the final value. */
function firstAt(
  times: Float64Array,
  volts: Float64Array,
  level: number,
  finalVolt: number,
  at: (timeSec: number) => number,
): number {
  const k = volts.findIndex((volt) => volt / finalVolt >= level / finalVolt)
  return k <= 0 ? 0 : bracketedRoot((t) => at(t) - level, times[k - 1]!, times[k]!)
}
