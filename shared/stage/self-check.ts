import type { SelfCheck, SelfCheckLine, SelfCheckOutcome } from '../contracts/compute'
import { logFrequencies } from './frequencies'
import { CircuitFigures } from './circuit-figures'
import { seededRandom } from '../numerics/random'
import { ProblemError } from '../problems'
import type { Figure } from './figure'
import type { Stage, StageResponse, StageResult } from './stage'
import type { PartValues } from './values'
import { computeResults, vectorOf } from './values'

/** Sets drawn over the parts' ranges besides the one shown. */
export const SEEDED_SETS = 50
const SEED = 20_000_101
const FREQUENCIES = 41

/** |ΔH| ≤ RELATIVE·|H| + ABSOLUTE·max|H|; figures RELATIVE. */
const RELATIVE = 1e-6
const ABSOLUTE = 1e-8
/** An extremum is flat: its place is known less well than its height. */
const EXTREMUM_RELATIVE = 1e-4

interface Tally {
  worst: number
  compared: number
  /** Largest difference over its own bound; above 1 it differs. */
  strain: number
  where: string
}

const emptyTally = (): Tally => ({ worst: 0, compared: 0, strain: 0, where: '' })

/**
 * Holds the formulas of a block against its circuit: `response` at frequencies around the circuit's poles and zeros,
 * each result against the figure that its `is:` finds, at the values shown and at 50 seeded sets over the parts' ranges.
 * Ideal amplifier, ideal source, no load: the formulas' own terms.
 *
 * @param values the set shown, by calculator entry
 */
export function selfCheck(stage: Stage, values: PartValues): SelfCheck {
  const seeded = seededTallies(stage)
  const shown = talliesOf(stage, [values], 'the values shown')
  const lines = [...shown.keys()].map((subject) => lineOf(stage, subject, shown.get(subject)!, seeded.get(subject)!))
  const checked = lines.filter((line) => line.outcome !== 'not checked')
  const outcome: SelfCheckOutcome = checked.some((line) => line.outcome === 'differs')
    ? 'differs'
    : checked.length > 0
      ? 'agrees'
      : 'not checked'
  return {
    outcome,
    worstRelativeDifference: checked.length ? worstOf(checked) : null,
    sets: SEEDED_SETS,
    lines,
  }
}

/** Largest difference of the lines that claim to be exact, else of all. */
function worstOf(lines: SelfCheckLine[]): number {
  const finite = lines.map((line) => line.worstRelativeDifference ?? 0)
  return Math.min(Number.MAX_VALUE, Math.max(...finite))
}

const seededCache = new WeakMap<Stage, Map<string, Tally>>()

/** The seeded part does not depend on the values shown: it is done once a stage. */
function seededTallies(stage: Stage): Map<string, Tally> {
  const kept = seededCache.get(stage)
  if (kept) return kept
  const made = talliesOf(stage, seededSets(stage), 'a seeded set')
  seededCache.set(stage, made)
  return made
}

/** Sets drawn log-uniformly and independently over the range of each entry. */
export function seededSets(stage: Stage): PartValues[] {
  const random = seededRandom(SEED)
  return Array.from({ length: SEEDED_SETS }, () =>
    Object.fromEntries(stage.parts.map((part) => [part.name, part.from * (part.to / part.from) ** random()])),
  )
}

function talliesOf(stage: Stage, sets: PartValues[], where: string): Map<string, Tally> {
  const tallies = new Map<string, Tally>()
  for (const response of stage.responses) tallies.set(responseSubject(stage, response), emptyTally())
  for (const result of stage.results) tallies.set(result.name, emptyTally())
  for (const values of sets) {
    const figures = new CircuitFigures(stage, values, {})
    const env = vectorOf(stage, values)
    try {
      computeResults(stage, env, (result) => figures.find(result, env))
    } catch (error) {
      if (error instanceof ProblemError) continue
      throw error
    }
    for (const response of stage.responses)
      compareResponse(figures, response, env, tallies.get(responseSubject(stage, response))!, where)
    for (const result of stage.results) compareResult(stage, figures, result, env, tallies.get(result.name)!, where)
  }
  return tallies
}

const responseSubject = (stage: Stage, response: StageResponse) =>
  stage.responses.length > 1 || stage.outputs.length > 1 ? `response ${response.output}` : 'response'

function compareResponse(
  figures: CircuitFigures,
  response: StageResponse,
  env: Float64Array,
  tally: Tally,
  where: string,
) {
  const [fromHz, toHz] = figures.span(response.output)
  const frequenciesHz = logFrequencies(fromHz / 100, toHz * 100, FREQUENCIES)
  const found = figures.response(response.output, frequenciesHz)
  const most = found.re.reduce((max, re, k) => Math.max(max, Math.hypot(re, found.im[k]!)), 0)
  const out = new Float64Array(2)
  for (let k = 0; k < frequenciesHz.length; k++) {
    response.evaluate(env, 0, 2 * Math.PI * frequenciesHz[k]!, out)
    const size = Math.hypot(found.re[k]!, found.im[k]!)
    const difference = Math.hypot(out[0]! - found.re[k]!, out[1]! - found.im[k]!)
    const scale = size + (ABSOLUTE / RELATIVE) * most
    note(tally, scale > 0 ? difference / scale : difference > 0 ? Infinity : 0, RELATIVE, where)
  }
}

function compareResult(
  stage: Stage,
  figures: CircuitFigures,
  result: StageResult,
  env: Float64Array,
  tally: Tally,
  where: string,
) {
  if (!result.evaluate || !result.is) return
  if (result.approximately?.when && !result.approximately.when(env)) return
  const formula = env[stage.slots.get(result.name)!]!
  const found = figures.find(result, env)
  // Neither has one, such as the peak of a response without a peak: nothing to compare.
  if (!Number.isFinite(formula) && !Number.isFinite(found)) return
  const difference = Math.abs(formula - found)
  const relative = found === 0 ? (difference === 0 ? 0 : Infinity) : difference / Math.abs(found)
  note(tally, Number.isFinite(relative) ? relative : Infinity, boundOf(result), where)
}

const boundOf = (result: StageResult) =>
  result.approximately?.within ?? (isExtremum(result.is!) ? EXTREMUM_RELATIVE : RELATIVE)

const isExtremum = (figure: Figure) => figure.kind === 'peak-frequency' || figure.kind === 'notch-frequency'

function note(tally: Tally, relative: number, bound: number, where: string) {
  tally.compared++
  if (!(relative <= tally.worst)) tally.worst = Number.isNaN(relative) ? Infinity : relative
  const strain = tally.worst / bound
  if (strain > tally.strain) {
    tally.strain = strain
    tally.where = where
  }
}

function lineOf(stage: Stage, subject: string, shown: Tally, seeded: Tally): SelfCheckLine {
  const result = stage.results.find((one) => one.name === subject)
  const compared = shown.compared + seeded.compared
  if (compared === 0) {
    const reason = !result
      ? 'The circuit could not be computed at any set.'
      : !result.is
        ? 'No is: says what it must equal on the circuit.'
        : !result.formula
          ? 'It has no formula: the figure found on the circuit is the result.'
          : 'The circuit shows no such figure at any of the sets tried.'
    return { subject, outcome: 'not checked', worstRelativeDifference: null, detail: reason }
  }
  const worst = shown.strain >= seeded.strain ? shown : seeded
  const against = result ? `“${result.isWords}” found on the circuit` : 'the nodal analysis of the circuit'
  const bound = result?.approximately ? ` It claims ${(100 * result.approximately.within).toPrecision(3)} %.` : ''
  return {
    subject,
    outcome: Math.max(shown.strain, seeded.strain) > 1 ? 'differs' : 'agrees',
    worstRelativeDifference: Math.min(Number.MAX_VALUE, Math.max(shown.worst, seeded.worst)),
    detail: `Held against ${against}; the largest difference is at ${worst.where || 'none'}.${bound}`,
  }
}
