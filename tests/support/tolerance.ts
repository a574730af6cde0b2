import { readFileSync } from 'node:fs'
import { resolve } from 'node:path'
import { formulaFigures } from '#shared/tolerance/figure-set'
import type { Spread } from '#shared/tolerance/spread'
import { formulaOf } from './formulas'

type Percents<T> = Record<'1' | '5' | '50' | '95' | '99', T>
type Signs = Record<string, -1 | 1>

export interface FigureCheck {
  formula: string
  nominal: number
  corner_min: number
  corner_max: number
  corner_min_at: Signs
  corner_max_at: Signs
  sensitivity: Record<string, number>
  monte_carlo: {
    mean: number
    std: number
    percentiles: Percents<number>
    std_by_linear_theory: number
    accept: { mean: number; std_relative: number; percentiles_absolute: Percents<number> }
  }
}

export interface ToleranceCheck {
  circuit: string
  parts: Record<string, number>
  tolerance: Record<string, number>
  figures: Record<string, FigureCheck>
  response_band: {
    output: string
    frequency_Hz: number[]
    nominal_dB: number[]
    percentiles_dB: Record<'5' | '50' | '95', number[]>
    accept_dB: number[]
  }
}

export const TOLERANCE_CHECKS = (
  JSON.parse(readFileSync(resolve('tests/checks/tolerance.json'), 'utf8')) as { circuits: ToleranceCheck[] }
).circuits

export const spreadsOfCheck = ({ parts, tolerance }: ToleranceCheck): Spread[] =>
  Object.entries(parts).map(([ref, nominal]) => ({ ref, nominal, tolerance: tolerance[ref]! }))

export const figuresOf = (spreads: readonly Spread[], formulas: Record<string, string>) =>
  formulaFigures(spreads, Object.fromEntries(Object.entries(formulas).map(([name, text]) => [name, formulaOf(text)])))

export const figuresOfCheck = (check: ToleranceCheck) =>
  figuresOf(
    spreadsOfCheck(check),
    Object.fromEntries(Object.entries(check.figures).map(([name, { formula }]) => [name, formula])),
  )
