import type { Dimension } from '../formula/dimension'
import { DIMENSIONS, dimensionOf, dimensionWords, sameDimension } from '../formula/dimension'
import type { Formula } from '../formula/parse'
import { parseFormula } from '../formula/parse'
import { compileCondition, compileFormula } from '../formula/compile'
import { CONDITION_FIELDS, CONDITION_NAMES } from '../contracts/conditions'
import type { Unit } from '../quantities/unit'
import { readQuantity } from '../quantities/read'
import type { Problem, Reading } from '../problems'
import { ProblemError } from '../problems'

export type Path = (string | number)[]
export type PositionOf = (path: Path) => { line: number; column: number }

export const dimensionOfUnit = (unit: string): Dimension =>
  DIMENSIONS[unit as keyof typeof DIMENSIONS] ?? DIMENSIONS['']

/**
 * Collects the problems of one calculator while it is read, each at its place in the page, so that an editor sees all
 * of them at once.
 */
export class ReadingContext {
  readonly problems: Problem[] = []
  names: string[] = []
  dimensions: Record<string, Dimension> = {}

  constructor(private readonly positionOf: PositionOf) {}

  /** Parts and results may be used in formulas; conditions too. */
  declare(parts: [string, string][], results: [string, string][]) {
    const all = [...parts, ...results, ...CONDITION_NAMES.map((name) => [name, CONDITION_FIELDS[name].unit] as const)]
    this.names = all.map(([name]) => name)
    this.dimensions = Object.fromEntries(all.map(([name, unit]) => [name, dimensionOfUnit(unit)]))
  }

  complain(path: Path, detail: string, code: Problem['code'] = 'calculator-not-read', column = 1) {
    const at = this.positionOf(path)
    this.problems.push({ code, detail, line: at.line, column: at.column + column - 1 })
  }

  /** The value of a reading, or undefined with its problems noted at the path. */
  take<T>(path: Path, reading: Reading<T>): T | undefined {
    if (reading.ok) return reading.value
    for (const problem of reading.problems) this.complain(path, problem.detail, problem.code, problem.column ?? 1)
    return undefined
  }

  /** A quantity above zero. */
  quantity(path: Path, text: string, unit: Unit, name?: string): number | undefined {
    const value = this.take(path, readQuantity(text, unit, { name }))
    if (value !== 0) return value
    this.complain(path, `${name ?? 'This'} must be above zero.`, 'value-not-positive')
    return undefined
  }

  /** A formula of the wanted dimension, compiled on the shared vector. */
  formula(path: Path, text: string, wanted: string | null, extra: string[] = []) {
    const formula = this.take(path, parseFormula(text, { kind: 'value' }))
    if (!formula || !this.known(path, formula, extra)) return undefined
    if (wanted !== null && !this.dimensionFits(path, formula, wanted)) return undefined
    const evaluate = this.guard(path, () => compileFormula(formula, this.names))
    return evaluate && { formula, evaluate }
  }

  condition(path: Path, text: string) {
    const formula = this.take(path, parseFormula(text, { kind: 'condition' }))
    if (!formula || !this.known(path, formula, [])) return undefined
    const dimension = dimensionOf(formula, this.dimensions)
    if (!dimension.ok) {
      this.take(path, dimension)
      return undefined
    }
    const applies = this.guard(path, () => compileCondition(formula, this.names))
    return applies && { formula, applies }
  }

  /** Runs a compilation; a problem it raises is noted at the path. */
  guard<T>(path: Path, make: () => T): T | undefined {
    try {
      return make()
    } catch (error) {
      if (!(error instanceof ProblemError)) throw error
      this.take(path, { ok: false, problems: error.problems })
      return undefined
    }
  }

  private known(path: Path, formula: Formula, extra: string[]): boolean {
    const unknown = [...formula.names].filter((name) => !this.names.includes(name) && !extra.includes(name))
    if (unknown.length === 0) return true
    // Compiling names the unknown one with its column and the nearest known name.
    const compile = formula.kind === 'condition' ? compileCondition : compileFormula
    this.guard(path, () => compile(formula, [...this.names, ...extra]))
    return false
  }

  private dimensionFits(path: Path, formula: Formula, wanted: string): boolean {
    const found = this.take(path, dimensionOf(formula, this.dimensions))
    if (!found) return false
    if (sameDimension(found, dimensionOfUnit(wanted))) return true
    this.complain(
      path,
      `This formula gives ${dimensionWords(found)}; ${dimensionWords(dimensionOfUnit(wanted))} is wanted here.`,
      'formula-dimension',
    )
    return false
  }
}
