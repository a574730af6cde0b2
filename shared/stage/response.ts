import { phaseRad } from '../analysis/phase'
import type { ResponseVector } from '../contracts/compute'
import type { Conditions } from '../contracts/conditions'
import { circuitFigures } from './circuit-figures'
import { logFrequencies } from './frequencies'
import type { Stage } from './stage'
import type { PartValues } from './values'

/** Points of a plot. */
export const PLOT_POINTS = 241

/** H of the fitted values under the conditions, from the circuit by nodal analysis. */
export function stageResponse(
  stage: Stage,
  values: PartValues,
  conditions: Conditions,
  output: string,
  frequenciesHz: ArrayLike<number>,
): ResponseVector {
  const found = circuitFigures(stage, values, conditions).response(output, frequenciesHz)
  return { output, frequenciesHz: Array.from(frequenciesHz), re: Array.from(found.re), im: Array.from(found.im) }
}

/** Phase of the same response, rad, unwrapped by the house convention: its low-frequency limit lies in (−π, π]. */
export function stagePhase(
  stage: Stage,
  values: PartValues,
  conditions: Conditions,
  output: string,
  frequenciesHz: ArrayLike<number>,
): number[] {
  return Array.from(phaseRad(circuitFigures(stage, values, conditions).rational(output), frequenciesHz))
}

/**
 * Frequencies of the plot, Hz: the range that the page states, else whole decades from well below the lowest pole or
 * zero to well above the highest, so that the axis rests while a value is typed.
 */
export function plotFrequencies(stage: Stage, values: PartValues, count = PLOT_POINTS): number[] {
  const [low, high] = circuitFigures(stage, values, {}).span(stage.plot.output)
  const fromHz = stage.plot.fromHz ?? 10 ** Math.floor(Math.log10(low / 20))
  const toHz = stage.plot.toHz ?? 10 ** Math.ceil(Math.log10(high * 40))
  return Array.from(logFrequencies(fromHz, Math.max(toHz, fromHz * 10), count))
}

/** Points of a curve that is drawn anew with each key; more stand around sharp pole pairs. */
const CURVE_POINTS = 121
const AROUND = [-1, -0.6, -0.3, -0.15, 0, 0.15, 0.3, 0.6, 1]

/**
 * Frequencies of a curve over a range, Hz, ascending: evenly spaced in their logarithm, and closer around pole pairs
 * whose peak would fall between two of them.
 */
export function curveFrequencies(stage: Stage, values: PartValues, fromHz: number, toHz: number): number[] {
  const even = Array.from(logFrequencies(fromHz, toHz, CURVE_POINTS))
  const { poles } = circuitFigures(stage, values, {}).rational(stage.plot.output)
  const close = poles.flatMap(({ re, im }) => {
    const size = Math.hypot(re, im)
    const halfWidth = Math.abs(re) / size
    return im > 0 && halfWidth < 0.3 ? AROUND.map((k) => (size / (2 * Math.PI)) * (1 + 2 * k * halfWidth)) : []
  })
  if (close.length === 0) return even
  return [...even, ...close.filter((f) => f > fromHz && f < toHz)].sort((a, b) => a - b)
}

/** Frequency that a stage is about, Hz: its corner or centre result, else the middle of its poles and zeros. */
export function centreHz(stage: Stage, values: PartValues): number {
  const figures = circuitFigures(stage, values, {})
  const corner = stage.results.find((one) => one.is?.kind === 'half-power' && one.is.edge === 'only')
  const natural = stage.results.find((one) => one.is?.kind === 'natural-frequency')
  const found = [corner, natural].map((one) => (one ? figures.find(one, new Float64Array(0)) : NaN)).find((f) => f > 0)
  const [low, high] = figures.span(stage.plot.output)
  return found ?? Math.sqrt(low * high)
}

/** Expected gain and phase a decade below the corner, at it, and a decade above, and at typed frequencies. */
export function testTable(stage: Stage, values: PartValues, conditions: Conditions, typedHz: number[] = []) {
  const centre = centreHz(stage, values)
  const frequenciesHz = [centre / 10, centre, centre * 10, ...typedHz]
  const output = stage.plot.output
  const { re, im } = stageResponse(stage, values, conditions, output, frequenciesHz)
  const phases = stagePhase(stage, values, conditions, output, frequenciesHz)
  return frequenciesHz.map((frequencyHz, k) => ({
    frequencyHz,
    gainDb: 20 * Math.log10(Math.hypot(re[k]!, im[k]!)),
    phaseRad: phases[k]!,
  }))
}
