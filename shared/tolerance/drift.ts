import { ProblemError } from '../problems'
import type { CornerSigns } from './corners'
import { ALL_CORNERS_MOST, corners } from './corners'
import type { FigureSet } from './figure-set'
import type { Spread } from './spread'
import { nominalValues, requireSpreads } from './spread'

/** Temperature coefficient of a part: fraction per kelvin, so 30 ppm/K is 30e-6. */
export interface DriftCoefficient {
  typicalPerKelvin: number
  /** Half width around the typical one: ±30 ppm/K of a C0G capacitor is typical 0, spread 30e-6. */
  spreadPerKelvin: number
}

export interface FigureDrift {
  /** Figure with typical coefficients; least and greatest with each part's coefficient anywhere in its spread. */
  typical: number
  least: number
  most: number
  leastAt: CornerSigns
  mostAt: CornerSigns
}

export interface DriftAt {
  tempKelvin: number
  method: 'all-corners' | 'sensitivity-signs'
  figures: Record<string, FigureDrift>
}

const PER_KELVIN = 1e-6

/** @example driftOfPpm(0, 30) // C0G: { typicalPerKelvin: 0, spreadPerKelvin: 30e-6 } */
export const driftOfPpm = (typicalPpmPerKelvin: number, spreadPpmPerKelvin: number): DriftCoefficient => ({
  typicalPerKelvin: typicalPpmPerKelvin * PER_KELVIN,
  spreadPerKelvin: spreadPpmPerKelvin * PER_KELVIN,
})

/**
 * Drift of figures at temperatures, tolerances aside: value·(1 + coefficient·(T − T_ref)), each designator having its
 * own coefficient.
 * @param coefficients by designator or calculator entry; a part without one does not drift
 * @param temperaturesKelvin for a range its two ends and what lies between as wanted
 * @param referenceKelvin where the values are nominal, 298.15 (25 °C) by default
 * @throws {ProblemError} 'value-out-of-range' when a part would vanish; as requireSpreads
 */
export function drift(
  spreads: readonly Spread[],
  figures: FigureSet,
  coefficients: Readonly<Record<string, DriftCoefficient>>,
  temperaturesKelvin: ArrayLike<number>,
  referenceKelvin = 298.15,
  allMost = ALL_CORNERS_MOST,
): DriftAt[] {
  requireSpreads(spreads)
  return Array.from(temperaturesKelvin, (tempKelvin) => {
    const shifted = spreads.map((spread) => at(spread, coefficients, tempKelvin - referenceKelvin))
    const typical = new Float64Array(figures.names.length)
    figures.evaluate(nominalValues(shifted), typical)
    const found = corners(shifted, figures, allMost)
    const named = figures.names.map((name, f) => {
      const { least, most, leastAt, mostAt } = found.figures[name]!
      return [name, { typical: typical[f]!, least, most, leastAt, mostAt }] as const
    })
    return { tempKelvin, method: found.method, figures: Object.fromEntries(named) }
  })
}

function at(spread: Spread, coefficients: Readonly<Record<string, DriftCoefficient>>, kelvin: number): Spread {
  const found = coefficients[spread.ref] ?? coefficients[spread.part ?? spread.ref]
  if (!found) return { ...spread, tolerance: 0 }
  const factor = 1 + found.typicalPerKelvin * kelvin
  const tolerance = Math.abs(found.spreadPerKelvin * kelvin) / factor
  if (!(factor > 0 && tolerance < 1))
    throw new ProblemError('value-out-of-range', `${spread.ref} would lose all its value over ${kelvin} K.`)
  return { ...spread, nominal: spread.nominal * factor, tolerance }
}
