import { meetTargets } from './exact-values'
import type { RankedSet } from './rank'
import { compareSets, levelAndSpread } from './rank'
import type { SizingOutcome, SizingProblem, Step } from './recipe'

/** How many sets of free picks are followed at most; the nearest to their start come first. */
const PICKS_MOST = 2400
/** Values of one free pick that are followed when another is free too; a fine series has no need of all of them. */
const VALUES_MOST = 60
const FINE_VALUES_MOST = 24
const RUNNERS_UP = 5
const ONE_SIDED_CHOICES = 3

/**
 * Fits the parts of a stage to its targets: every stock value of the free picks, the recipe's steps (corrected for parts
 * held against it), each step's value put on its stock neighbours, all combinations of these, and the best of them
 * moved by one and two stock steps as long as that helps.
 *
 * @returns the best set with what the recipe asked for, and the best of other free picks as runners-up; no best set when
 *   no value meets the recipe
 */
export function searchStock(problem: SizingProblem): SizingOutcome {
  const env = Float64Array.from(problem.start)
  const asked = problem.targets.filter((one) => one.asked)
  for (const target of problem.targets) env[target.slot] = target.value
  const starts = problem.free.map((pick) => pick.start(env))
  const failed = new Map<object, SizingOutcome['failed'][number]>()
  const best: { set: RankedSet; ideal: Map<number, number> }[] = []
  let setsTried = 0

  const judge = (values: Map<number, number>): RankedSet | null => {
    setsTried++
    for (const [slot, value] of values) env[slot] = value
    let worstError = 0
    for (const target of asked) {
      const error = Math.abs(target.formula(env) / target.value - 1)
      if (!Number.isFinite(error)) return null
      worstError = Math.max(worstError, error)
    }
    const parts = [...problem.free, ...problem.steps]
    const farFromStart = problem.free.reduce((sum, pick, k) => sum + distance(env[pick.slot]!, starts[k]!), 0)
    return { values, worstError, farFromStart, ...levelAndSpread(parts, (slot) => env[slot]!) }
  }

  const slots = problem.steps.map((step) => step.slot)
  let anyMet = false
  const follow = (picks: number[], branch: number) => {
    env.set(problem.start)
    for (const target of problem.targets) env[target.slot] = target.value
    picks.forEach((value, k) => (env[problem.free[k]!.slot] = value))
    const { failures, ideal } = followRecipe(problem.steps, env, branch)
    for (const failure of failures) if (!failed.has(failure.requirement)) failed.set(failure.requirement, failure)
    anyMet ||= failures.length === 0
    if (slots.some((slot) => !(env[slot]! > 0) || !Number.isFinite(env[slot]!))) return null
    if (problem.held > 0) {
      if (!meetTargets(env, slots, problem.targets)) meetTargets(env, slots, asked)
      for (const slot of slots) ideal.set(slot, env[slot]!)
    }
    problem.free.forEach((pick, k) => ideal.set(pick.slot, starts[k]!))
    let mine: RankedSet | null = null
    for (const values of neighbours(problem, picks, ideal, env)) {
      const set = judge(values)
      if (set && (!mine || compareSets(set, mine, problem.goodEnough) < 0)) mine = set
    }
    return mine && { set: mine, ideal }
  }
  const branches = problem.steps.some((step) => step.round !== 'nearest') ? ONE_SIDED_CHOICES : 1
  for (const picks of picksInOrder(problem, starts)) {
    let mine: (typeof best)[number] | null = null
    for (let branch = 0; branch < branches; branch++) {
      const one = follow(picks, branch)
      if (one && (!mine || compareSets(one.set, mine.set, problem.goodEnough) < 0)) mine = one
    }
    if (mine) best.push(mine)
  }

  const order = (a: { set: RankedSet }, b: { set: RankedSet }) => compareSets(a.set, b.set, problem.goodEnough)
  best.sort(order)
  for (const one of best.slice(0, RUNNERS_UP + 1)) one.set = polish(one.set, problem, judge)
  best.sort(order)
  return {
    best: best[0]?.set ?? null,
    ideal: best[0]?.ideal ?? new Map(),
    runnersUp: best.slice(1, 1 + RUNNERS_UP).map((one) => one.set),
    setsTried,
    failed: anyMet ? [] : [...failed.values()],
  }
}

const distance = (value: number, start: number) => (start > 0 ? Math.abs(Math.log(value / start)) : 0)

/**
 * Follows the steps in order, each value entering the next; gives the exact values and the requirements that do not
 * hold. A step rounded to one side is put on its `branch`-th stock value there at once, so that later steps see it.
 */
function followRecipe(steps: Step[], env: Float64Array, branch: number) {
  const failures: SizingOutcome['failed'] = []
  const ideal = new Map<number, number>()
  for (const step of steps) {
    for (const requirement of step.requirements)
      if (!requirement.holds(env)) failures.push({ step, requirement, nearest: requirement.nearest?.(env) })
    const value = step.formula(env)
    ideal.set(step.slot, value)
    env[step.slot] = step.round === 'nearest' ? value : (oneSided(step, value, branch + 1)[branch] ?? NaN)
  }
  return { failures, ideal }
}

/** Stock values of a free pick: all when it is alone, else the nearest to its start, few of a resistor's fine series. */
function candidates(stock: number[], start: number, picks: number): number[] {
  if (picks === 1 || !(start > 0)) return stock
  const perDecade = stock.length / Math.max(1, Math.log10(stock.at(-1)! / stock[0]!))
  const most = perDecade > 30 ? FINE_VALUES_MOST : VALUES_MOST
  return [...stock].sort((a, b) => distance(a, start) - distance(b, start)).slice(0, most)
}

/** All combinations of stock values for the free picks, nearest to their start first. */
function picksInOrder(problem: SizingProblem, starts: number[]): number[][] {
  const combinations = problem.free.reduce<number[][]>(
    (all, pick, k) =>
      all.flatMap((picks) => candidates(pick.stock, starts[k]!, problem.free.length).map((value) => [...picks, value])),
    [[]],
  )
  const far = (picks: number[]) => picks.reduce((sum, value, k) => sum + distance(value, starts[k]!), 0)
  return combinations
    .map((picks) => ({ picks, far: far(picks) }))
    .sort((a, b) => a.far - b.far)
    .slice(0, PICKS_MOST)
    .map((one) => one.picks)
}

/** Every combination of the stock neighbours of the recipe's values, with the picks as they are. */
function* neighbours(
  problem: SizingProblem,
  picks: number[],
  ideal: Map<number, number>,
  env: Float64Array,
): Generator<Map<number, number>> {
  const each = problem.steps.length <= 2 ? 2 : 1
  const choices = problem.steps.map((step) =>
    step.round === 'nearest'
      ? bothSides(step.stock, ideal.get(step.slot)!, each)
      : oneSided(step, ideal.get(step.slot)!, 2),
  )
  if (choices.some((one) => one.length === 0)) return
  const index = choices.map(() => 0)
  for (;;) {
    const values = new Map<number, number>()
    picks.forEach((value, k) => values.set(problem.free[k]!.slot, value))
    choices.forEach((choice, k) => values.set(problem.steps[k]!.slot, choice[index[k]!]!))
    yield values
    let k = 0
    while (k < index.length && ++index[k]! >= choices[k]!.length) index[k++] = 0
    if (k === index.length) return
  }
}

/** Place of the first stock value that is at least x (1e-12 slack). */
function firstAtLeast(stock: number[], x: number): number {
  let low = 0
  let high = stock.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (stock[middle]! < x * (1 - 1e-12)) low = middle + 1
    else high = middle
  }
  return low
}

const bothSides = (stock: number[], x: number, each: number): number[] => {
  const at = firstAtLeast(stock, x)
  return stock.slice(Math.max(0, Math.min(at, stock.length) - each), at + each)
}

const oneSided = ({ stock, round }: Step, x: number, count: number): number[] => {
  const at = firstAtLeast(stock, x)
  if (round === 'up') return stock.slice(at, at + count)
  const end = stock[at] !== undefined && stock[at]! <= x * (1 + 1e-12) ? at + 1 : at
  return stock.slice(Math.max(0, end - count), end).reverse()
}

/** Moves one or two sized parts by up to two stock steps while that makes the set better; free picks stay. */
function polish(
  set: RankedSet,
  problem: SizingProblem,
  judge: (values: Map<number, number>) => RankedSet | null,
): RankedSet {
  let best = set
  for (let round = 0; round < 4; round++) {
    let better = best
    for (const values of moves(best.values, problem.steps)) {
      const candidate = judge(values)
      if (candidate && compareSets(candidate, better, problem.goodEnough) < 0) better = candidate
    }
    if (better === best) return best
    best = better
  }
  return best
}

function* moves(values: Map<number, number>, steps: Step[]): Generator<Map<number, number>> {
  const near = steps.map((step) => {
    const at = firstAtLeast(step.stock, values.get(step.slot)!)
    return step.stock.slice(Math.max(0, at - 2), at + 3)
  })
  for (let a = 0; a < steps.length; a++)
    for (const first of near[a]!) {
      yield new Map(values).set(steps[a]!.slot, first)
      for (let b = a + 1; b < steps.length; b++)
        for (const second of near[b]!) yield new Map(values).set(steps[a]!.slot, first).set(steps[b]!.slot, second)
    }
}
