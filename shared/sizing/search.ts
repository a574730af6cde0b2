import { followRecipe, prepareVector } from './follow-recipe'
import { neighbours, polish } from './neighbours'
import { distance, picksInOrder, PICKS_FIRST, PICKS_MOST } from './picks'
import { proveBest } from './prove-best'
import type { RankedSet } from './rank'
import { compareSets, insideHouse, levelAndSpread } from './rank'
import type { SearchTarget, SizingOutcome, SizingProblem } from './recipe'

const RUNNERS_UP = 5
const ONE_SIDED_CHOICES = 3
/** Error that a set is taken to have while none is known. */
const NO_SET_ERROR = 0.5

/** A set with what the recipe asked for before it was put on stock. */
interface Found {
  set: RankedSet
  ideal: Map<number, number>
}

/**
 * Fits the parts of a stage to its targets. The recipe leads from stock values of the free picks to sets nearby; then
 * all stock combinations are searched for better ones, unless the best is within `goodEnough` already.
 *
 * @returns the best set with what the recipe asked for, and the best of other free picks as runners-up; no best set when
 *   no value meets the recipe, nor the nearest targets that its requirements name
 */
export function searchStock(problem: SizingProblem): SizingOutcome {
  const env = Float64Array.from(problem.start)
  const parts = [...problem.free, ...problem.steps]
  const asked = problem.targets.filter((one) => one.asked)
  const order = (a: Found, b: Found) => compareSets(a.set, b.set, problem.goodEnough)
  const failed = new Map<object, SizingOutcome['failed'][number]>()
  const best = new Map<string, Found>()
  let setsTried = 0
  prepareVector(env, problem, problem.targets, [])
  const starts = problem.free.map((pick) => pick.start(env))

  const judge = (values: Map<number, number>): RankedSet | null => {
    setsTried++
    for (const [slot, value] of values) env[slot] = value
    const errors = asked.map((target) => Math.abs(target.formula(env) / target.value - 1)).sort((a, b) => b - a)
    if (errors.some((error) => !Number.isFinite(error))) return null
    return {
      values,
      worstError: errors[0] ?? 0,
      errors,
      offStandIn: problem.targets.reduce(
        (sum, one) => (one.asked ? sum : sum + Math.abs(Math.log(one.formula(env) / one.value))),
        0,
      ),
      farFromStart: problem.free.reduce((sum, pick, k) => sum + distance(env[pick.slot]!, starts[k]!), 0),
      ...levelAndSpread(parts, (slot) => env[slot]!),
    }
  }
  const keep = (found: Found) => {
    const key = problem.free.map((pick) => found.set.values.get(pick.slot)!).join()
    const kept = best.get(key)
    if (!kept || order(found, kept) < 0) best.set(key, found)
  }

  const branches = problem.steps.some((step) => step.round !== 'nearest') ? ONE_SIDED_CHOICES : 1
  const all = picksInOrder(problem, starts)
  const followAll = (targets: readonly SearchTarget[], from: number, to: number): boolean => {
    let met = false
    let good: Found[] = []
    for (const { picks, far } of all.slice(from, to)) {
      // The picks come nearest first: once there are enough good sets, later ones are only further away.
      if (good.length > RUNNERS_UP && far > Math.LN2 + Math.max(...good.map((one) => one.set.farFromStart))) break
      for (let branch = 0; branch < branches; branch++) {
        prepareVector(env, problem, targets, picks)
        const { ideal, failures } = followRecipe(env, problem, targets, branch)
        for (const one of failures) if (!failed.has(one.requirement)) failed.set(one.requirement, one)
        met ||= failures.length === 0
        if (!ideal) continue
        problem.free.forEach((pick, k) => ideal.set(pick.slot, starts[k]!))
        for (const values of neighbours(problem, picks, ideal)) {
          const set = judge(values)
          if (set) keep({ set, ideal })
        }
      }
      good = [...best.values()].filter(({ set }) => set.worstError <= problem.goodEnough && insideHouse(set))
    }
    return met
  }
  let met = followAll(problem.targets, 0, PICKS_FIRST)
  if (best.size === 0 && failed.size > 0)
    followAll(nearestTargets(problem.targets, [...failed.values()]), 0, PICKS_FIRST)

  const rank = () => [...best.values()].sort(order)
  for (const one of rank().slice(0, RUNNERS_UP + 1)) one.set = polish(one.set, problem, judge)
  const movable = asked.filter((one) => parts.some((part) => one.uses.has(part.slot)))
  const reached = rank()[0]
  if (movable.length > 0 && parts.length > 0 && !(reached && reached.set.worstError <= problem.goodEnough)) {
    prepareVector(env, problem, problem.targets, [])
    for (const [slot, value] of reached?.set.values ?? []) env[slot] = value
    const worstOf = () => Math.max(...movable.map((one) => Math.abs(one.formula(env) / one.value - 1)))
    const offer = (values: Map<number, number>) => {
      const set = judge(values)
      if (!set) return Infinity
      keep({ set, ideal: reached?.ideal ?? new Map<number, number>() })
      return worstOf()
    }
    if (!proveBest(parts, movable, env, reached ? worstOf() : NO_SET_ERROR, problem.goodEnough, offer))
      met = followAll(problem.targets, PICKS_FIRST, PICKS_MOST) || met
  }

  const ranked = rank()
  return {
    best: ranked[0]?.set ?? null,
    ideal: ranked[0] ? idealOf(ranked[0], problem, starts, branches, env) : new Map(),
    runnersUp: ranked.slice(1, 1 + RUNNERS_UP).map((one) => one.set),
    setsTried,
    failed: met ? [] : [...failed.values()],
  }
}

/** The targets with those that a requirement names at their nearest feasible value. */
function nearestTargets(targets: readonly SearchTarget[], failed: SizingOutcome['failed']): SearchTarget[] {
  return targets.map((target) => {
    const nearest = failed.find((one) => one.requirement.target === target.slot)?.nearest
    return nearest !== undefined && Number.isFinite(nearest) ? { ...target, value: nearest } : target
  })
}

/** What the recipe asks for at the free picks of the set found, the branch nearest to it; as it was found otherwise. */
function idealOf(found: Found, problem: SizingProblem, starts: number[], branches: number, env: Float64Array) {
  const picks = problem.free.map((pick) => found.set.values.get(pick.slot)!)
  let nearest = { far: Infinity, ideal: found.ideal }
  for (let branch = 0; branch < branches; branch++) {
    prepareVector(env, problem, problem.targets, picks)
    const { ideal } = followRecipe(env, problem, problem.targets, branch)
    if (!ideal) continue
    problem.free.forEach((pick, k) => ideal.set(pick.slot, starts[k]!))
    const far = problem.steps.reduce((sum, { slot }) => sum + distance(found.set.values.get(slot)!, env[slot]!), 0)
    if (far < nearest.far) nearest = { far, ideal }
  }
  return nearest.ideal
}
