import { meetTargets } from './exact-values'
import type { SearchTarget, SizingOutcome, SizingProblem } from './recipe'
import { oneSided } from './stock-places'

/** Sets the vector back to what is held, with the targets and the picks in their places. */
export function prepareVector(
  env: Float64Array,
  problem: SizingProblem,
  targets: readonly SearchTarget[],
  picks: readonly number[],
) {
  env.set(problem.start)
  for (const target of targets) env[target.slot] = target.value
  picks.forEach((value, k) => (env[problem.free[k]!.slot] = value))
}

/**
 * Follows the steps in order, each value entering the next. A step rounded to one side is put on its `branch`-th stock
 * value there at once, so that later steps see it. Parts held against the recipe are made up for by the others.
 *
 * @param env vector from prepareVector; the slots of the steps are filled
 * @param targets what the recipe is followed for
 * @returns the exact values by slot (null when a part has none above 0), and the requirements that do not hold
 */
export function followRecipe(
  env: Float64Array,
  problem: SizingProblem,
  targets: readonly SearchTarget[],
  branch: number,
): { ideal: Map<number, number> | null; failures: SizingOutcome['failed'] } {
  const failures: SizingOutcome['failed'] = []
  const ideal = new Map<number, number>()
  for (const step of problem.steps) {
    for (const requirement of step.requirements)
      if (!requirement.holds(env)) failures.push({ step, requirement, nearest: requirement.nearest?.(env) })
    const value = step.formula(env)
    ideal.set(step.slot, value)
    env[step.slot] =
      step.round === 'nearest' ? value : (oneSided(step.stock, value, branch + 1, step.round)[branch] ?? NaN)
  }
  const slots = problem.steps.map((step) => step.slot)
  if (slots.some((slot) => !(env[slot]! > 0) || !Number.isFinite(env[slot]!))) return { ideal: null, failures }
  if (problem.held > 0) {
    if (!meetTargets(env, slots, [...targets]))
      meetTargets(
        env,
        slots,
        targets.filter((one) => one.asked),
      )
    for (const slot of slots) ideal.set(slot, env[slot]!)
  }
  return { ideal, failures }
}
