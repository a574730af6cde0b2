import type { SearchPart, SizedSet } from './recipe'
import { HOUSE_IMPEDANCE_OHM, HOUSE_LEAST_FARAD } from './recipe'

/** Errors nearer to each other than this count as equal. */
export const EQUAL_ERROR = 1e-9

/** A set with the figures that decide between sets of equal error. */
export interface RankedSet extends SizedSet {
  /** Relative error of each target asked, the largest first. */
  errors: number[]
  /** How far the targets not asked lie from what stands in for them, as a sum of natural logarithms. */
  offStandIn: number
  /** How far outside the house range of impedances, as a sum of natural logarithms; 0 inside. */
  outside: number
  /** How far the free picks lie from their start, as a sum of natural logarithms. */
  farFromStart: number
}

/** Level (geometric mean of the resistors, ohm) and spread (largest over smallest of a kind) of a set. */
export function levelAndSpread(parts: SearchPart[], value: (slot: number) => number) {
  const logs = (kind: SearchPart['kind']) => parts.filter((p) => p.kind === kind).map((p) => Math.log(value(p.slot)))
  const range = (all: number[]) => (all.length > 1 ? Math.max(...all) - Math.min(...all) : 0)
  const resistors = logs('resistor')
  const mean = resistors.reduce((sum, x) => sum + x, 0) / Math.max(1, resistors.length)
  const outside =
    resistors.reduce((sum, x) => sum + outsideHouse(x), 0) + logs('capacitor').reduce((sum, x) => sum + tooSmall(x), 0)
  return {
    impedanceOhm: resistors.length ? Math.exp(mean) : 0,
    spread: Math.exp(Math.max(range(resistors), range(logs('capacitor')))),
    outside,
  }
}

const FROM = Math.log(HOUSE_IMPEDANCE_OHM.from)
const TO = Math.log(HOUSE_IMPEDANCE_OHM.to)
const outsideHouse = (log: number) => Math.max(0, FROM - log, log - TO)
const tooSmall = (log: number) => Math.max(0, Math.log(HOUSE_LEAST_FARAD) - log)

/** Octaves: spreads and distances that differ by less than a half of one do not decide. */
const octaves = (log: number) => Math.round((2 * log) / Math.LN2) / 2

/** A worst error above this means that a target is out of reach; the others are to be met all the same. */
const OUT_OF_REACH = 0.01

/** True when every value lies in the house range of impedances. */
export const insideHouse = (set: RankedSet) => octaves(set.outside) === 0

/**
 * Order of two sets: worst target error first, errors within `goodEnough` (or 1e-9 of each other) being equal; where a
 * target is out of reach, the next error; then the house rules: targets not asked near their stand-in, impedances inside
 * the house range, free picks near their start, small spread; then the smaller error, then ascending values.
 */
export function compareSets(a: RankedSet, b: RankedSet, goodEnough: number): number {
  return (
    compareErrors(a.worstError, b.worstError, goodEnough) ||
    (a.worstError > Math.max(goodEnough, OUT_OF_REACH) ? compareRest(a.errors, b.errors, goodEnough) : 0) ||
    octaves(a.offStandIn) - octaves(b.offStandIn) ||
    octaves(a.outside) - octaves(b.outside) ||
    octaves(a.farFromStart) - octaves(b.farFromStart) ||
    octaves(Math.log(a.spread)) - octaves(Math.log(b.spread)) ||
    compareErrors(a.worstError, b.worstError, 0) ||
    compareValues(a, b)
  )
}

function compareRest(a: number[], b: number[], goodEnough: number): number {
  for (let k = 1; k < a.length; k++) {
    const order = compareErrors(a[k]!, b[k]!, goodEnough)
    if (order) return order
  }
  return 0
}

function compareErrors(a: number, b: number, goodEnough: number): number {
  if (a <= goodEnough && b <= goodEnough) return 0
  return Math.abs(a - b) <= EQUAL_ERROR ? 0 : a - b
}

function compareValues(a: SizedSet, b: SizedSet): number {
  for (const [slot, value] of a.values) {
    const other = b.values.get(slot)!
    if (value !== other) return value - other
  }
  return 0
}
