import type { ElementValues } from '../circuit/netlist/netlist'
import type { Conditions } from '../contracts/conditions'
import { CONDITION_NAMES } from '../contracts/conditions'
import type { Stage, StageResult } from './stage'

export type PartValues = Readonly<Record<string, number>>

/** Values by designator, matched parts spread out, for the nodal analysis. */
export function elementValues(stage: Stage, values: PartValues): ElementValues {
  const all: Record<string, number> = {}
  for (const part of stage.parts) for (const ref of part.refs) all[ref] = values[part.name]!
  return all
}

/** The vector of parts, results (yet NaN) and conditions (NaN where not stated). */
export function vectorOf(stage: Stage, values: PartValues, conditions: Conditions = {}): Float64Array {
  const env = new Float64Array(stage.slots.size).fill(NaN)
  for (const part of stage.parts) env[stage.slots.get(part.name)!] = values[part.name]!
  for (const name of CONDITION_NAMES) env[stage.slots.get(name)!] = conditions[name] ?? NaN
  return env
}

/**
 * Computes the results into the vector, in the order of computing.
 * @param find gives the figure of a result that has no formula, found on the circuit
 */
export function computeResults(stage: Stage, env: Float64Array, find: (result: StageResult) => number) {
  for (const result of stage.resultOrder)
    env[stage.slots.get(result.name)!] = result.evaluate ? result.evaluate(env) : find(result)
}

/** Default values of all parts. */
export const defaultValues = (stage: Stage): Record<string, number> =>
  Object.fromEntries(stage.parts.map((part) => [part.name, part.default]))
