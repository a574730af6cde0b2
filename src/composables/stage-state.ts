import type { ComputeRequest } from '#shared/contracts/compute'
import { CONDITION_NAMES } from '#shared/contracts/conditions'
import type { Conditions } from '#shared/contracts/conditions'
import { typedValue } from '#shared/quantities/format'
import type { Unit } from '#shared/quantities/unit'
import { CONDITION_FIELDS } from '#shared/contracts/conditions'
import { readCondition, readPartValue, readSeries, readTarget, type Stage } from '#shared/stage/index'
import type { SeriesName } from '#shared/preferred-values/series'

/** What a person has set on a bench, in SI units: all of it fits into the address. */
export interface BenchState {
  held: Record<string, number>
  targets: Record<string, number>
  series: Record<string, SeriesName>
  conditions: Conditions
}

export const emptyState = (): BenchState => ({ held: {}, targets: {}, series: {}, conditions: {} })

export const isEmptyState = (state: BenchState): boolean =>
  [state.held, state.targets, state.series, state.conditions].every((group) => Object.keys(group).length === 0)

/** The state as names and short texts for the address: `Ri=22.1k&f_c=2.4k&sourceOhm=50&Ri.series=E24`. */
export function stateQuery(stage: Stage, state: BenchState): URLSearchParams {
  const query = new URLSearchParams()
  for (const part of stage.parts) {
    const value = state.held[part.name]
    if (value !== undefined) query.set(part.name, typedValue(value, part.unit))
    const series = state.series[part.name]
    if (series !== undefined) query.set(`${part.name}.series`, series)
  }
  for (const result of stage.results) {
    const value = state.targets[result.name]
    if (value !== undefined) query.set(result.name, typedValue(value, result.unit as Unit))
  }
  for (const name of CONDITION_NAMES) {
    const value = state.conditions[name]
    if (value !== undefined) query.set(name, typedValue(value, CONDITION_FIELDS[name].unit as Unit))
  }
  return query
}

/** Reads an address back; what does not belong to this block or cannot be read is named, not taken. */
export function stateFromQuery(stage: Stage, query: URLSearchParams): { state: BenchState; refused: string[] } {
  const state = emptyState()
  const refused: string[] = []
  for (const [name, typed] of query) {
    const [head, tail] = name.split('.') as [string, string?]
    const isPart = stage.parts.some((part) => part.name === head)
    const isResult = stage.results.some((result) => result.name === name)
    if (isPart && tail === 'series') take(readSeries(stage, head, typed), (value) => (state.series[head] = value))
    else if (isPart && tail === undefined)
      take(readPartValue(stage, name, typed), (value) => (state.held[name] = value))
    else if (isResult) take(readTarget(stage, name, typed), (value) => (state.targets[name] = value))
    else if ((CONDITION_NAMES as string[]).includes(name))
      take(readCondition(name, typed), (value) => (state.conditions[name as keyof Conditions] = value))
    else refused.push(name)

    function take<T>(reading: { ok: true; value: T } | { ok: false }, put: (value: T) => void) {
      if (reading.ok) put(reading.value)
      else refused.push(`${name}=${typed}`)
    }
  }
  return { state, refused }
}

/** The state as the compute address and a saved sizing take it. */
export const stateRequest = (
  state: BenchState,
  goodEnough: number,
): Required<Pick<ComputeRequest, 'values' | 'targets' | 'conditions' | 'series' | 'goodEnough'>> => ({
  values: { ...state.held },
  targets: { ...state.targets },
  conditions: Object.fromEntries(Object.entries(state.conditions).filter(([, value]) => value !== undefined)) as Record<
    string,
    number
  >,
  series: { ...state.series },
  goodEnough,
})
