import type {
  Infeasible,
  LimitOutcome,
  PartOutcome,
  PartState,
  ResultOutcome,
  RunnerUp,
  StageOutcome,
} from '../contracts/compute'
import { CONDITION_FIELDS } from '../contracts/conditions'
import { isPreferred } from '../preferred-values/lookup'
import { inStock } from '../preferred-values/stock'
import { formatQuantity } from '../quantities/format'
import type { Unit } from '../quantities/unit'
import type { SizedSet, SizingOutcome } from '../sizing/recipe'
import { circuitFigures } from './circuit-figures'
import { changesResponse, fittedValues, sizeUnderConditions } from './size-under-conditions'
import type { Stage, StageAsked } from './stage'
import { computeResults, defaultValues, vectorOf } from './values'

/** A figure under the conditions stands beside the ideal one when it differs by more than this. */
const WORTH_SHOWING = 1e-3

/**
 * A stage at what is asked of it: held parts as they are, the others from the recipe when targets are asked (else at
 * their defaults), results at the fitted values, figures under the conditions, limits.
 *
 * @param stage read by readStage
 * @param asked values, targets and conditions in SI units
 * @throws {ProblemError} 'circuit-singular' when the circuit has no unique solution at these values
 */
export function evaluateStage(stage: Stage, asked: StageAsked): StageOutcome {
  const sizing = sizeUnderConditions(stage, asked)
  const values = fittedValues(stage, asked, sizing?.best ?? null)
  const ideal = circuitFigures(stage, values, {})
  const loaded = changesResponse(asked.conditions) ? circuitFigures(stage, values, asked.conditions) : null
  const env = vectorOf(stage, values, asked.conditions)
  computeResults(stage, env, (result) => ideal.find(result, env))
  const results: Record<string, ResultOutcome> = {}
  for (const result of stage.results) {
    const value = env[stage.slots.get(result.name)!]!
    const outcome: ResultOutcome = { value, unit: result.unit }
    if (loaded && result.is) {
      const found = loaded.find(result, env)
      const without = ideal.find(result, env)
      if (Math.abs(found - without) > WORTH_SHOWING * Math.abs(without)) outcome.underConditions = found
    }
    const target = asked.targets[result.name]
    if (target !== undefined) {
      outcome.target = target
      outcome.relativeError = ((outcome.underConditions ?? value) - target) / Math.abs(target)
    }
    results[result.name] = outcome
  }
  return {
    values,
    parts: partOutcomes(stage, asked, values, sizing),
    results,
    limits: limitOutcomes(stage, env),
    infeasible: infeasibleTargets(stage, asked, sizing),
    setsTried: sizing?.setsTried ?? 0,
    runnersUp: (sizing?.runnersUp ?? []).map((one) => runnerUp(stage, values, one)),
  }
}

function partOutcomes(stage: Stage, asked: StageAsked, values: Record<string, number>, sizing: SizingOutcome | null) {
  const free = new Set(stage.recipe?.free.map((one) => one.part))
  const outcomes: Record<string, PartOutcome> = {}
  for (const part of stage.parts) {
    const slot = stage.slots.get(part.name)!
    const series = asked.series[part.name] ?? part.series
    const sized = sizing?.best?.values.has(slot)
    const state: PartState = Object.hasOwn(asked.held, part.name)
      ? 'held'
      : !sized
        ? 'default'
        : free.has(part.name)
          ? 'free'
          : 'solved'
    const value = values[part.name]!
    const ideal = sized ? sizing?.ideal.get(slot) : undefined
    outcomes[part.name] = {
      value,
      unit: part.unit,
      state,
      ...(ideal === undefined ? {} : { ideal }),
      series,
      tolerance: part.tolerance,
      inStock: isPreferred(value, series) && inStock(value, part.kind, series),
    }
  }
  return outcomes
}

function limitOutcomes(stage: Stage, env: Float64Array): LimitOutcome[] {
  return stage.limits
    .filter((limit) => limit.applies?.(env))
    .map((limit) => ({ level: limit.level, when: limit.when, say: liveSentence(stage, limit.say, env) }))
}

/** Puts figures into a sentence: `{f_c}` becomes 2.401 kHz. */
export function liveSentence(
  stage: Stage,
  sentence: string,
  env: Float64Array,
  extra: Record<string, string> = {},
): string {
  return sentence.replace(/\{([^{}]{1,24})\}/g, (whole, name: string) => {
    if (Object.hasOwn(extra, name)) return extra[name]!
    const slot = stage.slots.get(name)
    if (slot === undefined) return whole
    return formatQuantity(env[slot]!, unitOfName(stage, name) as Unit)
  })
}

function unitOfName(stage: Stage, name: string): string {
  const entry = stage.results.find((one) => one.name === name) ?? stage.parts.find((one) => one.name === name)
  return entry?.unit ?? CONDITION_FIELDS[name as keyof typeof CONDITION_FIELDS].unit
}

function infeasibleTargets(stage: Stage, asked: StageAsked, sizing: SizingOutcome | null): Infeasible[] {
  if (!sizing) return []
  const steps = stage.recipe!.steps.filter((one) => !Object.hasOwn(asked.held, one.part))
  const env = vectorOf(stage, { ...defaultValues(stage), ...asked.held }, asked.conditions)
  for (const [name, standIn] of stage.recipe!.targets) env[stage.slots.get(name)!] = asked.targets[name] ?? standIn
  return sizing.failed.flatMap(({ step, requirement, nearest }) => {
    const own = steps.find((one) => stage.slots.get(one.part) === step.slot)
    const mine = own?.requirements.find((one) => one.holds === requirement.holds)
    if (!own || !mine) return []
    const unit = stage.results.find((one) => one.name === mine.target)?.unit ?? ''
    const words: Record<string, string> =
      nearest === undefined ? {} : { nearest: formatQuantity(nearest, unit as Unit) }
    return [
      {
        part: own.part,
        say: liveSentence(stage, mine.say, env, words),
        ...(mine.target ? { target: mine.target } : {}),
        ...(nearest !== undefined && Number.isFinite(nearest) ? { nearest } : {}),
      },
    ]
  })
}

function runnerUp(stage: Stage, values: Record<string, number>, set: SizedSet): RunnerUp {
  const all = { ...values }
  for (const part of stage.parts) all[part.name] = set.values.get(stage.slots.get(part.name)!) ?? all[part.name]!
  return { values: all, worstRelativeError: set.worstError, impedanceOhm: set.impedanceOhm, spread: set.spread }
}
