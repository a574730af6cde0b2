import type { Problem, Reading } from '../problems'
import { readStage } from '../stage/read-stage'
import type { Stage } from '../stage/stage'
import type { NamedPlace, PageSource } from './read-page'
import { readPage } from './read-page'

/** A page whose circuit and calculator can compute. */
export interface Block {
  page: PageSource
  stage: Stage
}

/** Reads a whole page: source, stage, and that every live value and formula in the notes exists. */
export function readBlock(text: string): Reading<Block> {
  const page = readPage(text)
  if (!page.ok) return page
  const { circuit, calculator } = page.value
  const stage = readStage({
    circuit: circuit.text,
    circuitLine: circuit.line,
    calculator: calculator.text,
    calculatorLine: calculator.line,
  })
  if (!stage.ok) return stage
  const { slots, results, responses } = stage.value
  const problem = (what: string, { name, line, column }: NamedPlace): Problem => ({
    code: 'page-not-read',
    detail: `“${name}” is not ${what} of this block.`,
    line,
    column,
  })
  const hasFormula = (name: string) =>
    name === 'response' ? responses.length > 0 : results.some((one) => one.name === name && one.formula)
  const problems = [
    ...page.value.values
      .filter(({ name }) => !slots.has(name))
      .map((place) => problem('a part, result or condition', place)),
    ...page.value.formulas
      .filter(({ name }) => !hasFormula(name))
      .map((place) => problem('the response or a result with a formula', place)),
  ].sort((p, q) => p.line! - q.line! || p.column! - q.column!)
  if (problems.length) return { ok: false, problems: problems as [Problem, ...Problem[]] }
  return { ok: true, value: { page: page.value, stage: stage.value } }
}
