import type { SearchPart, SearchTarget } from './recipe'
import { searchOrder } from './search-order'
import { firstAtLeast } from './stock-places'
import type { Trend } from './trend'
import { trendOf } from './trend'

/** Formulas computed at most; a search that would need more ends with what it has. */
const EVALUATIONS_MOST = 300_000
/** The same where a set that is good enough will do, as on a page that follows each key. */
const EVALUATIONS_MOST_LIVE = 60_000
/** Formulas after which the search is given up if the choices made by then promise many times too many. */
const LOOK_AHEAD_AFTER = 30_000
const TOO_MANY = 3
const SLACK = 1e-9
/** Combinations of more parts are beyond being looked through. */
const PARTS_MOST = 12

interface Target {
  /** Target over its wanted value: 1 when met. */
  ratio: (env: Float64Array) => number
  trends: (Trend | null)[]
}

/**
 * Looks through all stock combinations for the sets with the smallest worst target error, part by part; a choice is left
 * out only when a target that moves one way with every part still open cannot come within the bound any more.
 *
 * @param parts what may move; not empty
 * @param targets what was asked; not empty
 * @param env vector with everything else in place; its slots of the parts are changed
 * @param bound relative error that is already met; only sets as good or better are of interest
 * @param offer judges one set (in env) and gives its worst error; the bound shrinks to it, but not below `goodEnough`
 * @returns true when every combination was either offered or ruled out
 * Source: branch and bound, A. H. Land and A. G. Doig, Econometrica 28 (1960) 497 (from memory).
 */
export function proveBest(
  parts: readonly SearchPart[],
  targets: readonly SearchTarget[],
  env: Float64Array,
  bound: number,
  goodEnough: number,
  offer: (values: Map<number, number>) => number,
): boolean {
  if (parts.length > PARTS_MOST || parts.some((part) => part.stock.length === 0)) return false
  const all = targets.map((target) => targetAlong(target, parts, env))
  const order = searchOrder({
    counts: parts.map((part) => part.stock.length),
    trends: all.map((one) => one.trends),
    spans: all.map((one) => parts.map((part, k) => (one.trends[k] ? spanOf(one, part, env) : 0))),
    bound,
  })
  const chosen = order.map((k) => parts[k]!)
  const levels = chosen.map((_, depth) => levelOf(chosen, order, all, depth))
  const most = goodEnough > 0 ? EVALUATIONS_MOST_LIVE : EVALUATIONS_MOST
  let evaluations = 0
  let limit = bound
  let given = false

  const choose = (depth: number): void => {
    if (depth === chosen.length) {
      const error = offer(new Map(parts.map((part) => [part.slot, env[part.slot]!])))
      if (error < limit) limit = Math.max(error, goodEnough)
      return
    }
    const { slot, stock } = chosen[depth]!
    const { windows, checks } = levels[depth]!
    let from = 0
    let to = stock.length
    for (const window of windows) {
      const range = window(env, limit + SLACK, from, to)
      evaluations += range.evaluations
      from = range.from
      to = range.to
      if (from >= to) return
    }
    for (let k = from; k < to && !given; k++) {
      const done = (k - from) / (to - from)
      given =
        evaluations > most || (depth === 0 && evaluations > LOOK_AHEAD_AFTER && evaluations > TOO_MANY * most * done)
      env[slot] = stock[k]!
      evaluations += checks.length
      if (checks.every((ratio) => Math.abs(ratio(env) - 1) <= limit + SLACK)) choose(depth + 1)
    }
  }
  choose(0)
  return !given
}

function targetAlong(target: SearchTarget, parts: readonly SearchPart[], env: Float64Array): Target {
  const ratio = (vector: Float64Array) => target.formula(vector) / target.value
  return {
    ratio,
    trends: parts.map((part) =>
      target.uses.has(part.slot)
        ? trendOf(
            ratio,
            part,
            parts.filter((one) => target.uses.has(one.slot)),
            env,
          )
        : null,
    ),
  }
}

function spanOf({ ratio }: Target, part: SearchPart, env: Float64Array): number {
  const kept = env[part.slot]!
  const at = (value: number) => {
    env[part.slot] = value
    return Math.log(ratio(env))
  }
  const span = Math.abs(at(part.stock.at(-1)!) - at(part.stock[0]!))
  env[part.slot] = kept
  return Number.isFinite(span) && span > 0 ? span : Math.log(part.stock.at(-1)! / part.stock[0]!)
}

type Window = (
  env: Float64Array,
  bound: number,
  from: number,
  to: number,
) => { from: number; to: number; evaluations: number }

/** What can be said of the part at one depth, when those before it are chosen and those after it are open. */
function levelOf(chosen: SearchPart[], order: number[], targets: Target[], depth: number) {
  const windows: Window[] = []
  const checks: Target['ratio'][] = []
  for (const { ratio, trends } of targets) {
    const trend = trends[order[depth]!]
    if (!trend) continue
    const open = chosen
      .map((part, k) => ({ part, trend: trends[order[k]!] }))
      .slice(depth + 1)
      .flatMap(({ part, trend: one }) => (one ? [{ ...part, sign: one.sign }] : []))
    if (open.some((one) => one.sign === 0)) continue
    if (trend.sign === 0) {
      if (open.length === 0) checks.push(ratio)
      continue
    }
    windows.push(windowOf(ratio, chosen[depth]!, trend, open))
  }
  return { windows, checks }
}

/** The stretch of a part's stock in which a target can still be met, the open parts being anywhere in their stock. */
function windowOf(
  ratio: Target['ratio'],
  { slot, stock }: SearchPart,
  { sign, exponent }: Trend,
  open: { slot: number; stock: number[]; sign: number }[],
): Window {
  const most = open.map((one) => (one.sign > 0 ? one.stock.at(-1)! : one.stock[0]!))
  const least = open.map((one) => (one.sign > 0 ? one.stock[0]! : one.stock.at(-1)!))
  const middle = stock[stock.length >> 1]!
  return (env, bound, from, to) => {
    let evaluations = 0
    const at = (value: number, corner: number[]) => {
      evaluations++
      env[slot] = value
      for (let k = 0; k < corner.length; k++) env[open[k]!.slot] = corner[k]!
      return ratio(env)
    }
    const low = 1 - bound
    const high = 1 + bound
    if (exponent !== null) {
      const largest = at(middle, most)
      const smallest = open.length ? at(middle, least) : largest
      const one = low > 0 ? middle * (low / largest) ** (1 / exponent) : exponent > 0 ? 0 : Infinity
      const other = middle * (high / smallest) ** (1 / exponent)
      const [first, last] = exponent > 0 ? [one, other] : [other, one]
      return {
        from: Math.max(from, firstAtLeast(stock, first * (1 - SLACK))),
        to: Math.min(to, firstAtLeast(stock, last * (1 + SLACK))),
        evaluations,
      }
    }
    // First place, in rising order of the target, where it can reach `low`, and the first where it must exceed `high`.
    const place = (k: number) => (sign > 0 ? from + k : to - 1 - k)
    const count = to - from
    const reach = bisect(count, (k) => at(stock[place(k)]!, most) >= low)
    const exceed = bisect(count, (k) => !(at(stock[place(k)]!, least) <= high))
    return sign > 0
      ? { from: from + reach, to: from + exceed, evaluations }
      : { from: to - exceed, to: to - reach, evaluations }
  }
}

/** First k below count for which `holds`, which stays true once it is; count when there is none. */
function bisect(count: number, holds: (k: number) => boolean): number {
  let low = 0
  let high = count
  while (low < high) {
    const middle = (low + high) >> 1
    if (holds(middle)) high = middle
    else low = middle + 1
  }
  return low
}
