import type { ComputeRequest } from '../contracts/compute'
import { CONDITION_FIELDS, CONDITION_NAMES, Conditions } from '../contracts/conditions'
import { nearName } from '../formula/near-name'
import type { SeriesName } from '../preferred-values/series'
import { SERIES_NAMES } from '../preferred-values/series'
import { formatQuantity } from '../quantities/format'
import { readGain, readQuantity, readTemperature } from '../quantities/read'
import type { Unit } from '../quantities/unit'
import type { Problem, ProblemCode, Reading } from '../problems'
import { unread } from '../problems'
import { BUILDABLE } from './buildable'
import type { Stage, StageAsked, StagePart, StageResult } from './stage'
import { computeResults, defaultValues, vectorOf } from './values'

type Typed = number | string

/**
 * Reads what was sent or typed: each entry by the unit of its field.
 * @returns SI numbers, or every problem with the JSON pointer of its entry
 */
export function readStageRequest(stage: Stage, request: ComputeRequest): Reading<StageAsked> {
  const problems: Problem[] = []
  const collect = <T>(
    group: string,
    entries: Record<string, Typed> | undefined,
    read: (name: string, typed: Typed) => Reading<T>,
  ) => {
    const values: Record<string, T> = {}
    for (const [name, typed] of Object.entries(entries ?? {})) {
      const reading = read(name, typed)
      if (reading.ok) values[name] = reading.value
      else problems.push(...reading.problems.map((one) => ({ ...one, pointer: pointer(group, name) })))
    }
    return values
  }
  const held = collect('values', request.values, (name, typed) => readPartValue(stage, name, typed))
  const targets = collect('targets', request.targets, (name, typed) => readTarget(stage, name, typed))
  const conditions = collect('conditions', request.conditions, readCondition)
  const series = collect('series', request.series, (name, typed) => readSeries(stage, name, typed))
  const output = request.output ?? stage.plot.output
  if (!stage.outputs.includes(output))
    problems.push({
      code: 'output-unknown',
      detail: `${output} is not an output of this block. It has ${stage.outputs.join(', ')}.`,
      pointer: '#/output',
    })
  if (problems.length) return { ok: false, problems: problems as [Problem, ...Problem[]] }
  return { ok: true, value: { held, targets, conditions, series, output, goodEnough: request.goodEnough ?? 0 } }
}

const pointer = (group: string, name: string) => `#/${group}/${name.replaceAll('~', '~0').replaceAll('/', '~1')}`

const unknown = (code: ProblemCode, name: string, what: string, known: string[]) => {
  const near = nearName(name, known)
  return unread(
    code,
    `${name.slice(0, 40)} is not ${what} of this block. ${near ? `Did you mean ${near}?` : `It has ${known.join(', ')}.`}`,
  )
}

/** One part's value: typed text or ohm, farad, henry. */
export function readPartValue(stage: Stage, name: string, typed: Typed): Reading<number> {
  const part = stage.parts.find((one) => one.name === name)
  if (!part)
    return unknown(
      'part-unknown',
      name,
      'a part',
      stage.parts.map((one) => one.name),
    )
  const reading =
    typeof typed === 'number' ? finite(typed, name) : readQuantity(typed, part.unit, { name, allowZero: true })
  return reading.ok ? buildable(part, reading.value) : reading
}

function finite(value: number, name: string): Reading<number> {
  return Number.isFinite(value) ? { ok: true, value } : unread('value-not-read', `${name} needs a finite number.`)
}

function buildable(part: StagePart, value: number): Reading<number> {
  const [least, most] = BUILDABLE[part.unit]
  if (!(value > 0))
    return unread(
      'value-not-positive',
      `${part.name} must be above zero; ${formatQuantity(value, part.unit)} was understood.`,
    )
  if (value < least || value > most)
    return unread(
      'value-out-of-range',
      `${formatQuantity(value, part.unit)} cannot be built; ${part.name} takes ${formatQuantity(least, part.unit, { trim: true })} to ${formatQuantity(most, part.unit, { trim: true })}.`,
    )
  return { ok: true, value }
}

/** One target: by the unit of its result; a gain as a ratio or in dB, with the block's own sign. */
export function readTarget(stage: Stage, name: string, typed: Typed): Reading<number> {
  const result = stage.results.find((one) => one.name === name)
  const settable = [...(stage.recipe?.targets.keys() ?? [])]
  if (!result)
    return unknown(
      'result-unknown',
      name,
      'a result',
      stage.results.map((one) => one.name),
    )
  if (!settable.includes(name))
    return unread(
      'target-not-settable',
      `${name} follows from the parts and cannot be asked for here. ${settable.join(', ') || 'Nothing'} can.`,
    )
  if (result.unit === '') return readRatio(stage, result, typed)
  const reading = typeof typed === 'number' ? finite(typed, name) : readQuantity(typed, result.unit as Unit, { name })
  if (!reading.ok) return reading
  if (!(reading.value > 0)) return unread('value-not-positive', `${name} must be above zero.`)
  if (reading.value > 1e15 || reading.value < 1e-15)
    return unread(
      'value-out-of-range',
      `${formatQuantity(reading.value, result.unit as Unit)} is beyond anything that can be built.`,
    )
  return reading
}

function readRatio(stage: Stage, result: StageResult, typed: Typed): Reading<number> {
  const sign = signOf(stage, result)
  const reading = typeof typed === 'number' ? finite(typed, result.name) : readGain(typed)
  if (!reading.ok) return reading
  const { gain, decibel } = typeof reading.value === 'number' ? { gain: reading.value, decibel: false } : reading.value
  if (gain === 0) return unread('value-not-positive', `${result.name} cannot be zero.`)
  if (Math.abs(gain) > 1e9 || Math.abs(gain) < 1e-9)
    return unread(
      'value-out-of-range',
      `${result.name} of ${formatQuantity(gain, '')} is beyond anything that can be built.`,
    )
  if (decibel) return { ok: true, value: sign * Math.abs(gain) }
  if (Math.sign(gain) === sign) return { ok: true, value: gain }
  const other = formatQuantity(-gain, '', { trim: true })
  return sign < 0
    ? unread('target-wrong-sign', `This stage inverts: ${other}?`)
    : unread('target-wrong-sign', `${result.name} is positive in this block: ${other}?`)
}

/** Sign that a result has in this block: that of its stand-in target, else of its value at the defaults. */
function signOf(stage: Stage, result: StageResult): 1 | -1 {
  const standIn = stage.recipe?.targets.get(result.name)
  if (standIn !== undefined) return standIn < 0 ? -1 : 1
  const env = vectorOf(stage, defaultValues(stage))
  computeResults(stage, env, () => NaN)
  return env[stage.slots.get(result.name)!]! < 0 ? -1 : 1
}

/** One condition by its own unit. */
export function readCondition(name: string, typed: Typed): Reading<number> {
  if (!(CONDITION_NAMES as string[]).includes(name))
    return unknown('condition-unknown', name, 'a condition', CONDITION_NAMES)
  const key = name as keyof Conditions
  const field = CONDITION_FIELDS[key]
  const reading =
    typeof typed === 'number'
      ? finite(typed, name)
      : key === 'temperatureKelvin'
        ? readTemperature(typed)
        : readQuantity(typed, field.unit as Unit, {
            name: field.meaning,
            allowZero: true,
            allowNegative: key.startsWith('supply'),
          })
  if (!reading.ok) return reading
  const checked = Conditions.shape[key].safeParse(reading.value)
  if (checked.success) return { ok: true, value: reading.value }
  return unread(
    reading.value < 0 ? 'value-not-positive' : 'value-out-of-range',
    `${formatQuantity(reading.value, field.unit as Unit)} cannot be the ${field.meaning}.`,
  )
}

/** One part's preferred series. */
export function readSeries(stage: Stage, name: string, typed: Typed): Reading<SeriesName> {
  if (!stage.parts.some((one) => one.name === name))
    return unknown(
      'part-unknown',
      name,
      'a part',
      stage.parts.map((one) => one.name),
    )
  const series = SERIES_NAMES.find((one) => one.toLowerCase() === String(typed).trim().toLowerCase())
  if (!series)
    return unread(
      'series-unknown',
      `“${String(typed).slice(0, 20)}” is not a preferred series. ${SERIES_NAMES.join(', ')} are.`,
    )
  return { ok: true, value: series }
}
