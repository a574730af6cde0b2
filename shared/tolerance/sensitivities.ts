import { RIDDERS_RATIO, riddersLimit } from '../numerics/ridders'
import type { FigureSet } from './figure-set'
import type { Spread } from './spread'
import { nominalValues, requireSpreads } from './spread'

/** First relative step; each following one is half as large. */
const FIRST_STEP = 1 / 32
const STEPS = 11

export interface FigureSensitivities {
  nominal: number
  /** d ln(figure)/d ln(part) by designator; NaN where the figure is 0 or not defined. */
  relative: Record<string, number>
  /** Standard deviation to first order for uniform draws, in the figure's unit. */
  linearDeviation: number
}

/**
 * Relative sensitivities of figures to each part, by extrapolated central differences: some 1e-11 for smooth figures.
 *
 *     S = (p/F)·dF/dp = d ln F/d ln p,  σ_F ≈ |F|·√(Σ S²·tolerance²/3)
 *
 * @returns by figure
 * @throws {ProblemError} as requireSpreads
 */
export function sensitivities(spreads: readonly Spread[], figures: FigureSet): Record<string, FigureSensitivities> {
  const { nominal, slopes } = slopesOf(spreads, figures)
  return Object.fromEntries(
    figures.names.map((name, f) => {
      const size = nominal[f]!
      const relative = spreads.map(({ ref }, p): [string, number] => [ref, slopes[p]![f]! / size])
      const variance = spreads.reduce((sum, { tolerance }, p) => sum + (slopes[p]![f]! * tolerance) ** 2 / 3, 0)
      const finite = relative.map(([ref, s]): [string, number] => [ref, Number.isFinite(s) ? s : NaN])
      return [name, { nominal: size, relative: Object.fromEntries(finite), linearDeviation: Math.sqrt(variance) }]
    }),
  )
}

/** p·dF/dp in the unit of the figure: one row a part, one column a figure. */
export function slopesOf(
  spreads: readonly Spread[],
  figures: FigureSet,
): { nominal: Float64Array; slopes: Float64Array[] } {
  requireSpreads(spreads)
  const values = nominalValues(spreads)
  const count = figures.names.length
  const [nominal, up, down] = [new Float64Array(count), new Float64Array(count), new Float64Array(count)]
  figures.evaluate(values, nominal)
  const slopes = spreads.map(({ nominal: held }, p) => {
    const differences = Array.from({ length: count }, (): number[] => [])
    for (let k = 0, step = FIRST_STEP; k < STEPS; k++, step /= RIDDERS_RATIO) {
      values[p] = held * (1 + step)
      figures.evaluate(values, up)
      values[p] = held * (1 - step)
      figures.evaluate(values, down)
      for (let f = 0; f < count; f++) differences[f]!.push((up[f]! - down[f]!) / (2 * step))
    }
    values[p] = held
    return Float64Array.from(differences, riddersLimit)
  })
  return { nominal, slopes }
}
