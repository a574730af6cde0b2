import { ProblemError } from '../problems'

/** A field: text, a number, or nothing. */
export type CsvCell = string | number | null

/** What a spreadsheet would take for a formula, or drop before it looks for one; full-width forms count too. */
const TAKEN_FOR_FORMULA = /^[=+\-@\t\r\n\0＝＋－＠]/
const NEEDS_QUOTES = /[",\r\n]|^\s|\s$/

/**
 * Rows as CSV: commas, CRLF after each row, quotes where a field needs them and doubled inside. Text that a spreadsheet
 * would take for a formula begins with an apostrophe; numbers stay numbers, written with a point and all digits.
 * @throws {ProblemError} 'value-out-of-range' for a number that is none or infinite
 * @example csvText([['gainDb', 'note'], [-3.01, '=A1']]) // "gainDb,note\r\n-3.01,'=A1\r\n"
 * Source: RFC 4180 (2005), section 2.
 */
export const csvText = (rows: readonly (readonly CsvCell[])[]): string =>
  rows.map((row) => `${row.map(csvField).join(',')}\r\n`).join('')

function csvField(cell: CsvCell): string {
  if (cell === null) return ''
  if (typeof cell === 'string') {
    const safe = TAKEN_FOR_FORMULA.test(cell) ? `'${cell}` : cell
    return NEEDS_QUOTES.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe
  }
  if (!Number.isFinite(cell)) throw new ProblemError('value-out-of-range', `${cell} is no number for a table.`)
  // Minus zero is written without its sign.
  return String(cell + 0)
}
