import type { PartState } from '#shared/contracts/compute'
import type { Sizing } from '#shared/contracts/sizings'
import type { Stage } from '#shared/stage/index'

/** One part to fit: a designator with its stored value, SI. */
export interface FittedPart {
  ref: string
  value: number
  unit: string
  series: string
  /** Fraction. */
  tolerance: number
  state: PartState
  inStock: boolean
}

/**
 * What is to be fitted, designator by designator; a matched part has a row for each.
 * @param stage the revision's circuit and calculator, for designators; null when it cannot be read
 */
export const fittedParts = ({ outcome }: Sizing, stage: Stage | null): FittedPart[] =>
  Object.entries(outcome.parts).flatMap(([name, part]) => {
    const refs = stage?.parts.find((one) => one.name === name)?.refs ?? [name]
    return refs.map((ref) => ({ ref, ...part }))
  })

/** A stored result with the words and the symbol that the revision gives it. */
export interface StoredResult {
  name: string
  symbol: string
  meaning: string
  unit: string
  isApproximate: boolean
  /** Shown in dB as well. */
  isGain: boolean
  value: number
  target: number | null
  error: number | null
  underConditions: number | null
}

export const storedResults = ({ outcome }: Sizing, stage: Stage | null): StoredResult[] =>
  Object.entries(outcome.results).map(([name, one]) => {
    const known = stage?.results.find((result) => result.name === name)
    return {
      name,
      symbol: known?.symbol ?? name,
      meaning: known?.meaning ?? '',
      unit: one.unit,
      isApproximate: known?.approximately != null,
      isGain: known?.is?.kind === 'gain' || known?.is?.kind === 'peak-gain',
      value: one.value,
      target: one.target ?? null,
      error: one.relativeError ?? null,
      underConditions: one.underConditions ?? null,
    }
  })

/** Values for the drawing by designator, as text. */
export const drawingTexts = (
  sizing: Sizing,
  stage: Stage | null,
  text: (value: number, unit: string) => string,
): Record<string, string> =>
  Object.fromEntries(fittedParts(sizing, stage).map((part) => [part.ref, text(part.value, part.unit)]))

const MARKS = { approved: '✓', 'in review': '…', returned: '↩', superseded: '△', withdrawn: '△' } as const

/** Status of a revision with its mark: `✓ approved`. */
export const statusWords = (status: Sizing['statusNow']): string => `${MARKS[status]} ${status}`
