import { stockValues } from '../preferred-values/stock'
import type { SearchPart, SizingOutcome, SizingProblem } from '../sizing/recipe'
import { searchStock } from '../sizing/search'
import type { Stage, StageAsked, StagePart, StageResult } from './stage'
import { defaultValues, vectorOf } from './values'

/** Solves the parts that are not held for the targets asked. Null when nothing is asked or nothing can be sized. */
export function sizeStage(stage: Stage, asked: StageAsked): SizingOutcome | null {
  const recipe = stage.recipe
  if (!recipe || Object.keys(asked.targets).length === 0) return null
  const isHeld = (part: string) => Object.hasOwn(asked.held, part)
  const start = vectorOf(stage, { ...defaultValues(stage), ...asked.held }, asked.conditions)
  const searchPart = (name: string): SearchPart => {
    const part = stage.parts.find((one) => one.name === name)!
    return { slot: stage.slots.get(name)!, kind: part.kind, stock: stockOf(part, asked) }
  }
  const sized = [...recipe.free.map((one) => one.part), ...recipe.steps.map((one) => one.part)]
  const problem: SizingProblem = {
    start,
    free: recipe.free
      .filter((one) => !isHeld(one.part))
      .map((one) => ({ ...searchPart(one.part), start: one.evaluate })),
    steps: recipe.steps
      .filter((one) => !isHeld(one.part))
      .map((one) => ({
        ...searchPart(one.part),
        formula: one.evaluate,
        round: one.round,
        requirements: one.requirements.map((requirement) => ({
          holds: requirement.holds,
          ...(requirement.target === null ? {} : { target: stage.slots.get(requirement.target)! }),
          ...(requirement.nearest ? { nearest: requirement.nearest } : {}),
        })),
      })),
    held: sized.filter(isHeld).length,
    targets: [...recipe.targets].map(([name, standIn]) => ({
      slot: stage.slots.get(name)!,
      value: asked.targets[name] ?? standIn,
      asked: Object.hasOwn(asked.targets, name),
      ...formulaAlone(stage, name),
    })),
    goodEnough: asked.goodEnough,
  }
  return searchStock(problem)
}

/** Values that a part may take: its series (or the one asked) inside the range of its entry. */
const stockOf = (part: StagePart, asked: StageAsked): number[] =>
  stockValues(part.kind, asked.series[part.name] ?? part.series, part.from, part.to)

/** A result from the parts alone: what it needs of other results is computed beside the vector, not read from it. */
function formulaAlone(stage: Stage, name: string) {
  const needed = neededResults(stage, name)
  const scratch = new Float64Array(stage.slots.size)
  const slots = needed.map((one) => stage.slots.get(one.name)!)
  const slot = stage.slots.get(name)!
  const alone = needed.length === 1 && needed[0]!.name === name ? needed[0]!.evaluate! : null
  const formula = (env: Float64Array) => {
    scratch.set(env)
    for (let k = 0; k < needed.length; k++) scratch[slots[k]!] = needed[k]!.evaluate!(scratch)
    return scratch[slot]!
  }
  return {
    formula: alone ?? formula,
    uses: new Set(needed.flatMap((one) => [...one.formula!.names].map((used) => stage.slots.get(used)!))),
  }
}

function neededResults(stage: Stage, name: string): StageResult[] {
  const byName = new Map(stage.results.map((one) => [one.name, one]))
  const wanted = new Set<string>()
  const visit = (one: string) => {
    const result = byName.get(one)
    if (!result?.formula || wanted.has(one)) return
    wanted.add(one)
    for (const used of result.formula.names) visit(used)
  }
  visit(name)
  return stage.resultOrder.filter((one) => wanted.has(one.name))
}
