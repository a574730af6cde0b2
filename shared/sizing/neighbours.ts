import { distance } from './picks'
import type { RankedSet } from './rank'
import { compareSets } from './rank'
import type { SizingProblem, Step } from './recipe'
import { bothSides, firstAtLeast, oneSided } from './stock-places'

/** Combinations of stock neighbours tried at most; of the steps beyond, the nearest value alone is. */
const COMBINATIONS_MOST = 1024
/** Recipes with more steps are polished one part at a time. */
const PAIRED_STEPS_MOST = 10

/** Every combination of the stock neighbours of the recipe's values, with the picks as they are. */
export function* neighbours(
  problem: SizingProblem,
  picks: readonly number[],
  ideal: ReadonlyMap<number, number>,
): Generator<Map<number, number>> {
  const each = problem.steps.length <= 2 && problem.free.length <= 1 ? 2 : 1
  let combinations = 1
  const choices = problem.steps.map((step) => {
    const exact = ideal.get(step.slot)!
    const all =
      step.round === 'nearest' ? bothSides(step.stock, exact, each) : oneSided(step.stock, exact, 2, step.round)
    const few = combinations * all.length > COMBINATIONS_MOST ? nearestOf(all, exact) : all
    combinations *= few.length
    return few
  })
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

const nearestOf = (values: number[], exact: number): number[] =>
  [...values].sort((a, b) => distance(a, exact) - distance(b, exact)).slice(0, 1)

/** Moves one or two sized parts by up to two stock steps while that makes the set better; free picks stay. */
export function polish(
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
      for (let b = a + 1; b < steps.length && steps.length <= PAIRED_STEPS_MOST; b++)
        for (const second of near[b]!) yield new Map(values).set(steps[a]!.slot, first).set(steps[b]!.slot, second)
    }
}
