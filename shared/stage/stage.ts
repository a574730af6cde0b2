import type { Netlist } from '../circuit/netlist/netlist'
import type { Circuit, PassiveKind } from '../circuit/part'
import type { LimitLevel } from '../contracts/calculator'
import type { Conditions } from '../contracts/conditions'
import type { Formula } from '../formula/parse'
import type { SeriesName } from '../preferred-values/series'
import type { Figure } from './figure'

/** One calculator entry: a part, or several matched ones that share a value. */
export interface StagePart {
  name: string
  kind: PassiveKind
  unit: 'Ω' | 'F' | 'H'
  /** Designators that it stands for. */
  refs: string[]
  default: number
  series: SeriesName
  /** Range used by the search and by the self-check, SI. */
  from: number
  to: number
  /** Fraction. */
  tolerance: number
  driftPerKelvin: number | null
  class: string | null
  meaning: string | null
}

export interface StageResult {
  name: string
  symbol: string
  unit: string
  meaning: string
  output: string
  formula: Formula | null
  /** Value from the vector of parts, results and conditions. */
  evaluate: ((env: Float64Array) => number) | null
  is: Figure | null
  isWords: string | null
  approximately: { within: number; when: ((env: Float64Array) => boolean) | null; whenText: string | null } | null
}

export interface StageResponse {
  output: string
  formula: Formula
  evaluate: (env: Float64Array, sRe: number, sIm: number, out: Float64Array) => void
}

export interface StageRequirement {
  holds: (env: Float64Array) => boolean
  say: string
  target: string | null
  nearest: ((env: Float64Array) => number) | null
}

export interface StageStep {
  part: string
  formula: Formula
  evaluate: (env: Float64Array) => number
  round: 'nearest' | 'up' | 'down'
  requirements: StageRequirement[]
}

export interface StageRecipe {
  /** Results that may be asked, with the value that stands in when one is not. */
  targets: Map<string, number>
  free: { part: string; start: Formula; evaluate: (env: Float64Array) => number }[]
  steps: StageStep[]
}

export interface StageLimit {
  level: LimitLevel
  when: string
  say: string
  /** Null when it needs data of an op-amp that has not been chosen. */
  applies: ((env: Float64Array) => boolean) | null
}

/**
 * A block's circuit and calculator, read and ready to compute. Parts, results and conditions share one vector:
 * first the parts, then the results, then the conditions.
 */
export interface Stage {
  circuit: Circuit
  netlist: Netlist
  parts: StagePart[]
  /** In the order of the page. */
  results: StageResult[]
  /** In the order of computing: what a formula uses comes before it. */
  resultOrder: StageResult[]
  responses: StageResponse[]
  recipe: StageRecipe | null
  limits: StageLimit[]
  outputs: string[]
  plot: { fromHz: number | null; toHz: number | null; output: string }
  slots: Map<string, number>
  /** Op-amps of the circuit by designator. */
  opamps: string[]
}

/** What is asked of a stage, in SI units. */
export interface StageAsked {
  held: Record<string, number>
  targets: Record<string, number>
  series: Record<string, SeriesName>
  conditions: Conditions
  output: string
  goodEnough: number
}

/** Nothing asked: defaults, ideal conditions, first output. */
export const nothingAsked = (stage: Stage): StageAsked => ({
  held: {},
  targets: {},
  series: {},
  conditions: {},
  output: stage.plot.output,
  goodEnough: 0,
})
