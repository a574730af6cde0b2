import type { SizedSet, SizingOutcome } from '../sizing/recipe'
import { CircuitFigures } from './circuit-figures'
import { sizeStage } from './size'
import type { Stage, StageAsked } from './stage'
import { computeResults, defaultValues, vectorOf } from './values'

/** How often the targets of the ideal stage are moved against what source and load do. */
const ROUNDS = 3
/** Shifts of the targets below this are no worth another search. */
const SETTLED = 1e-4

/** True when source or load may change the response. */
export const changesResponse = ({ sourceOhm, loadOhm, loadFarad }: StageAsked['conditions']) =>
  Boolean(sourceOhm || loadOhm || loadFarad)

/** Values of all parts: held, sized, else their defaults. */
export function fittedValues(stage: Stage, asked: StageAsked, best: SizedSet | null): Record<string, number> {
  const values = { ...defaultValues(stage), ...asked.held }
  for (const part of stage.parts) {
    const sized = best?.values.get(stage.slots.get(part.name)!)
    if (sized !== undefined) values[part.name] = sized
  }
  return values
}

/**
 * Sizes a stage so that its figures under the conditions meet the targets. The recipe knows the ideal stage alone, so it
 * is asked for targets moved by as much as source and load took away; the set with the smallest worst error is kept.
 */
export function sizeUnderConditions(stage: Stage, asked: StageAsked): SizingOutcome | null {
  let best = sizeStage(stage, asked)
  if (!best?.best || !changesResponse(asked.conditions)) return best
  const picks = freePicks(stage, asked, best.best)
  let at = comparedWith(stage, asked, best)
  let worst = at.worst
  let targets = asked.targets
  for (let round = 0; round < ROUNDS; round++) {
    const moved = Object.fromEntries(
      Object.entries(asked.targets).map(([name, value]) => [name, value * at.shifts[name]!]),
    )
    const most = Math.max(...Object.keys(moved).map((name) => Math.abs(moved[name]! / targets[name]! - 1)))
    if (!(most > SETTLED)) break
    targets = moved
    // The free picks stay: with them the level of impedance stays, and so does what the source does to it.
    const next = sizeStage(stage, { ...asked, targets, held: { ...picks, ...asked.held } })
    if (!next?.best) break
    for (const [name, value] of Object.entries(picks)) next.best.values.set(stage.slots.get(name)!, value)
    at = comparedWith(stage, asked, next)
    if (at.worst < worst)
      [best, worst] = [{ ...next, failed: best.failed, ideal: new Map([...best.ideal, ...next.ideal]) }, at.worst]
  }
  return best
}

function freePicks(stage: Stage, asked: StageAsked, best: SizedSet): Record<string, number> {
  const free = stage.recipe!.free.filter((one) => !Object.hasOwn(asked.held, one.part))
  return Object.fromEntries(free.map(({ part }) => [part, best.values.get(stage.slots.get(part)!)!]))
}

/** Worst target error under the conditions, and by how much each target's ideal figure exceeds its loaded one. */
function comparedWith(stage: Stage, asked: StageAsked, { best }: SizingOutcome) {
  const values = fittedValues(stage, asked, best)
  const ideal = new CircuitFigures(stage, values, {})
  const loaded = new CircuitFigures(stage, values, asked.conditions)
  const env = vectorOf(stage, values, asked.conditions)
  computeResults(stage, env, (result) => ideal.find(result, env))
  let worst = 0
  const shifts: Record<string, number> = {}
  for (const [name, target] of Object.entries(asked.targets)) {
    const result = stage.results.find((one) => one.name === name)!
    const shift = result.is ? ideal.find(result, env) / loaded.find(result, env) : 1
    shifts[name] = shift > 0 && Number.isFinite(shift) ? shift : 1
    worst = Math.max(worst, Math.abs(env[stage.slots.get(name)!]! / shifts[name]! / target - 1))
  }
  return { worst, shifts }
}
