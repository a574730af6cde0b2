import { z } from 'zod'
import { OutputName, PartRef, ResultName } from './names'

const FormulaText = z.union([z.string().min(1).max(2000), z.number()]).transform(String)
const QuantityText = z.union([z.string().min(1).max(60), z.number()]).transform(String)
const PARTS_MAX = 400
const RESULTS_MAX = 100
const atMost = (most: number) => (entries: object) => Object.keys(entries).length <= most
const Sentence = z.string().min(1).max(500)

export const PART_ENTRY_KINDS = ['resistor', 'capacitor', 'inductor', 'opamp'] as const

/** One calculator entry: a part, or several matched ones (`of:`) with one field and one pick. */
export const PartEntry = z.strictObject({
  kind: z.enum(PART_ENTRY_KINDS).optional(),
  of: z.array(PartRef).min(2).max(16).optional(),
  default: QuantityText.optional(),
  series: z.enum(['E3', 'E6', 'E12', 'E24', 'E48', 'E96', 'E192']).optional(),
  from: QuantityText.optional(),
  to: QuantityText.optional(),
  tolerance: QuantityText.optional(),
  drift: QuantityText.optional(),
  class: z.string().min(1).max(60).optional(),
  meaning: Sentence.optional(),
})

export const RESULT_UNITS = ['', 'Hz', 'Ω', 'ohm', 's', 'F', 'H', 'V', 'A', 'dB', '%', 'V/√Hz', 'rad/s'] as const

/** A computed figure. `is` names what it must equal on the circuit; without a formula the found figure is the result. */
export const ResultEntry = z.strictObject({
  formula: FormulaText.optional(),
  symbol: z.string().min(1).max(24).optional(),
  unit: z.enum(RESULT_UNITS).default(''),
  meaning: Sentence,
  is: z.string().min(1).max(80).optional(),
  output: OutputName.optional(),
  approximately: QuantityText.optional(),
  when: FormulaText.optional(),
})

/** A condition of a recipe step. When it fails, `say` is shown with the nearest target that can be met. */
export const Requirement = z.strictObject({
  that: FormulaText,
  say: Sentence,
  target: ResultName.optional(),
  nearest: FormulaText.optional(),
})

export const RecipeStep = z.strictObject({
  part: PartRef,
  formula: FormulaText,
  round: z.enum(['nearest', 'up', 'down']).default('nearest'),
  require: z.union([Requirement.transform((one) => [one]), z.array(Requirement).max(8)]).default([]),
})

export const SizingRecipe = z.strictObject({
  /** What may be asked, with the value that stands for it when it is not. */
  targets: z.record(ResultName, QuantityText),
  /** Parts picked freely, each with a formula of the targets that is snapped to stock. */
  free: z.record(PartRef, z.strictObject({ start: FormulaText })).default({}),
  steps: z.array(RecipeStep).max(40).default([]),
})

export const LIMIT_LEVELS = ['note', 'warning', 'not allowed'] as const

/** A bound on the use of the block: when the condition is true, the sentence is shown; `{f_c}` in it is live. */
export const LimitEntry = z.strictObject({
  level: z.enum(LIMIT_LEVELS),
  when: FormulaText,
  say: Sentence,
})

export const PlotRange = z.strictObject({
  from: QuantityText.optional(),
  to: QuantityText.optional(),
  output: OutputName.optional(),
})

/** The `calculator` fence after YAML. */
export const CalculatorSource = z.strictObject({
  parts: z.record(PartRef, PartEntry).refine(atMost(PARTS_MAX), `A calculator has at most ${PARTS_MAX} parts.`),
  results: z
    .record(ResultName, ResultEntry)
    .refine(atMost(RESULTS_MAX), `A calculator has at most ${RESULTS_MAX} results.`)
    .default({}),
  response: z.union([FormulaText, z.record(OutputName, FormulaText)]).optional(),
  sizing: SizingRecipe.optional(),
  limits: z.array(LimitEntry).max(40).default([]),
  plots: PlotRange.optional(),
})
export type CalculatorSource = z.output<typeof CalculatorSource>
export type PartEntry = z.output<typeof PartEntry>
export type ResultEntry = z.output<typeof ResultEntry>
export type LimitLevel = (typeof LIMIT_LEVELS)[number]
