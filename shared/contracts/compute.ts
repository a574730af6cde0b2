import { z } from 'zod'
import { LIMIT_LEVELS } from './calculator'
import { Conditions } from './conditions'
import { BlockCode, OutputName, PartRef, ResultName } from './names'

/** A number in SI units, or text as an engineer types it. */
export const Quantity = z.union([z.number(), z.string().max(200)])

/**
 * A computed figure. Where the circuit has none (the peak of a response without a peak) it is NaN here and null in
 * JSON, which knows no NaN.
 */
export const Figure = z
  .custom<number | null>((value) => value === null || typeof value === 'number', 'Expected a number or null.')
  .transform((value) => value ?? NaN)

export const FREQUENCIES_MAX = 20_000

/** What may be sent to a compute address; values and targets are read by unit afterwards. */
export const ComputeRequest = z.strictObject({
  values: z.record(z.string().max(40), Quantity).default({}),
  targets: z.record(z.string().max(40), Quantity).default({}),
  conditions: z.record(z.string().max(40), Quantity).default({}),
  series: z.record(z.string().max(40), z.string().max(8)).default({}),
  output: z.string().max(40).optional(),
  frequenciesHz: z.array(z.number().min(0).max(1e15)).min(1).max(FREQUENCIES_MAX).optional(),
  /** Relative target error within which sets count as equal. */
  goodEnough: z.number().min(0).max(0.5).default(0),
})
export type ComputeRequest = z.input<typeof ComputeRequest>

export const PART_STATES = ['held', 'free', 'solved', 'default'] as const

export const PartOutcome = z.strictObject({
  value: z.number(),
  unit: z.string(),
  state: z.enum(PART_STATES),
  /** The value that the recipe asked for before it was put on a preferred one. */
  ideal: z.number().optional(),
  series: z.string(),
  tolerance: z.number(),
  inStock: z.boolean(),
})

export const ResultOutcome = z.strictObject({
  /** The formula at the fitted values (ideal amplifier, unloaded); without a formula, the figure found on the circuit. */
  value: Figure,
  unit: z.string(),
  target: z.number().optional(),
  /** (figure − target) / |target|, of the figure under the conditions where that stands. */
  relativeError: Figure.optional(),
  /** Found on the circuit under the conditions, when it differs by more than 0.1 %. */
  underConditions: Figure.optional(),
})

export const SELF_CHECK_OUTCOMES = ['agrees', 'differs', 'not checked'] as const
export const SelfCheckLine = z.strictObject({
  /** `response`, `response lp`, or the name of a result. */
  subject: z.string(),
  outcome: z.enum(SELF_CHECK_OUTCOMES),
  /** Largest |difference| relative to the figure found on the circuit. */
  worstRelativeDifference: z.number().nullable(),
  /** What it was held against, or why it was not: a sentence. */
  detail: z.string(),
})
export const SelfCheck = z.strictObject({
  outcome: z.enum(SELF_CHECK_OUTCOMES),
  worstRelativeDifference: z.number().nullable(),
  /** Value sets tried besides the one shown. */
  sets: z.number().int(),
  lines: z.array(SelfCheckLine),
})

export const LimitOutcome = z.strictObject({ level: z.enum(LIMIT_LEVELS), when: z.string(), say: z.string() })

export const Infeasible = z.strictObject({
  part: PartRef,
  say: z.string(),
  target: ResultName.optional(),
  nearest: z.number().optional(),
})

export const RunnerUp = z.strictObject({
  values: z.record(z.string(), z.number()),
  worstRelativeError: z.number(),
  impedanceOhm: z.number(),
  spread: z.number(),
})

export const ResponseVector = z.strictObject({
  output: OutputName,
  frequenciesHz: z.array(z.number()),
  re: z.array(Figure),
  im: z.array(Figure),
})

/** A stage at its values, all but the response. */
export const StageOutcome = z.strictObject({
  values: z.record(z.string(), z.number()),
  parts: z.record(z.string(), PartOutcome),
  results: z.record(z.string(), ResultOutcome),
  limits: z.array(LimitOutcome),
  infeasible: z.array(Infeasible),
  setsTried: z.number().int(),
  runnersUp: z.array(RunnerUp),
})

export const ComputeAnswer = StageOutcome.extend({
  block: z.strictObject({ code: BlockCode, revision: z.number().int() }),
  conditions: Conditions,
  response: ResponseVector,
  selfCheck: SelfCheck,
  engineVersion: z.string(),
})
export type ComputeAnswer = z.output<typeof ComputeAnswer>
export type StageOutcome = z.output<typeof StageOutcome>
export type PartOutcome = z.output<typeof PartOutcome>
export type PartState = (typeof PART_STATES)[number]
export type ResultOutcome = z.output<typeof ResultOutcome>
export type SelfCheck = z.output<typeof SelfCheck>
export type SelfCheckLine = z.output<typeof SelfCheckLine>
export type SelfCheckOutcome = (typeof SELF_CHECK_OUTCOMES)[number]
export type LimitOutcome = z.output<typeof LimitOutcome>
export type RunnerUp = z.output<typeof RunnerUp>
export type Infeasible = z.output<typeof Infeasible>
export type ResponseVector = z.output<typeof ResponseVector>
