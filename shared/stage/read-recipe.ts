import type { CalculatorSource } from '../contracts/calculator'
import { readGain } from '../quantities/read'
import type { Unit } from '../quantities/unit'
import type { ReadingContext } from './reading-context'
import type { StageLimit, StagePart, StageRecipe, StageResult } from './stage'

/** Reads `sizing`: what may be asked, what is picked freely, and the ordered steps that give the other parts. */
export function readRecipe(
  context: ReadingContext,
  source: CalculatorSource,
  parts: StagePart[],
  results: StageResult[],
): StageRecipe | null {
  const recipe = source.sizing
  if (!recipe) return null
  const targets = new Map<string, number>()
  for (const [name, text] of Object.entries(recipe.targets)) {
    const path = ['sizing', 'targets', name]
    const result = results.find((one) => one.name === name)
    if (!result) context.complain(path, `${name} is not a result of this calculator, so it cannot be a target.`)
    else if (!result.evaluate) context.complain(path, `${name} has no formula, so it cannot be a target.`)
    else {
      const value =
        result.unit === ''
          ? context.take(path, readGain(text))?.gain
          : context.quantity(path, text, result.unit as Unit, name)
      if (value === 0) context.complain(path, `${name} cannot be asked to be zero.`)
      else if (value !== undefined) targets.set(name, value)
    }
  }
  const sized = new Set<string>()
  const partOf = (path: (string | number)[], name: string) => {
    const part = parts.find((one) => one.name === name)
    if (!part) context.complain(path, `${name} is not a part of this calculator.`)
    if (sized.has(name)) context.complain(path, `${name} is sized twice.`)
    sized.add(name)
    return part
  }
  const free = Object.entries(recipe.free).flatMap(([name, { start }]) => {
    const part = partOf(['sizing', 'free', name], name)
    const read = part && context.formula(['sizing', 'free', name, 'start'], start, part.unit)
    return read ? [{ part: name, start: read.formula, evaluate: read.evaluate }] : []
  })
  const steps = recipe.steps.flatMap((step, k) => {
    const path = ['sizing', 'steps', k]
    const part = partOf([...path, 'part'], step.part)
    const read = part && context.formula([...path, 'formula'], step.formula, part.unit)
    const requirements = step.require.flatMap((one, r) => {
      const at = Array.isArray(step.require) && step.require.length > 1 ? [...path, 'require', r] : [...path, 'require']
      const holds = context.condition([...at, 'that'], one.that)
      if (one.target !== undefined && !targets.has(one.target))
        context.complain([...at, 'target'], `${one.target} is not a target of this recipe.`)
      const unit = results.find((result) => result.name === one.target)?.unit ?? null
      const nearest = one.nearest === undefined ? undefined : context.formula([...at, 'nearest'], one.nearest, unit)
      return holds
        ? [{ holds: holds.applies, say: one.say, target: one.target ?? null, nearest: nearest?.evaluate ?? null }]
        : []
    })
    return read
      ? [{ part: step.part, formula: read.formula, evaluate: read.evaluate, round: step.round, requirements }]
      : []
  })
  return { targets, free, steps }
}

/** Reads `limits`. One that needs op-amp data, as `GBW(U1)`, is kept, and applies once an op-amp is chosen. */
export function readLimits(context: ReadingContext, source: CalculatorSource): StageLimit[] {
  return source.limits.flatMap((limit, k): StageLimit[] => {
    const path = ['limits', k, 'when']
    const read = context.condition(path, limit.when)
    if (!read) return []
    const applies = read.formula.opampData.length > 0 ? null : read.applies
    return [{ level: limit.level, when: limit.when, say: limit.say, applies }]
  })
}
