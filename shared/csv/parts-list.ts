import type { CsvCell } from './write-csv'
import { csvText } from './write-csv'

/** A line of a parts list. */
export interface PartsListLine {
  /** Reference designator as drawn. */
  ref: string
  /** Ohm, farad or henry; null for a part without a value, such as an op-amp. */
  value: number | null
  /** Ω, F, H, or nothing. */
  unit: string
  /** Fraction of the value. */
  tolerance?: number | null | undefined
  /** Preferred series, such as E24. */
  series?: string | undefined
  stockNumber?: string | undefined
  note?: string | undefined
}

/**
 * A parts list as CSV, one line a designator in the order given.
 * @throws {ProblemError} 'value-out-of-range'
 */
export const partsListCsv = (lines: readonly PartsListLine[]): string =>
  csvText([
    ['part', 'value', 'unit', 'tolerance', 'series', 'stockNumber', 'note'],
    ...lines.map(({ ref, value, unit, tolerance, series, stockNumber, note }): CsvCell[] => [
      ref,
      value,
      unit,
      tolerance ?? null,
      series ?? null,
      stockNumber ?? null,
      note ?? null,
    ]),
  ])
