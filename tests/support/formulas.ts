import type { Formula, FormulaKind } from '#shared/formula/parse'
import { parseFormula } from '#shared/formula/parse'
import type { Problem } from '#shared/problems'
import { valueOf } from '#shared/problems'

/** The formula of a text that is expected to be right. */
export const formulaOf = (text: string, kind: FormulaKind = 'value'): Formula => valueOf(parseFormula(text, { kind }))

/** The first problem of a text that is expected to be refused. */
export function refusalOf(text: string, kind: FormulaKind = 'value'): Problem {
  const reading = parseFormula(text, { kind })
  if (reading.ok) throw new Error(`“${text.slice(0, 80)}” was read.`)
  return reading.problems[0]
}
