import type { Problem, Reading } from '../problems'
import { readStage } from '../stage/read-stage'
import type { Stage } from '../stage/stage'
import type { PageSource } from './read-page'
import { readPage } from './read-page'

/** A page whose circuit and calculator can compute. */
export interface Block {
  page: PageSource
  stage: Stage
}

/** Reads a whole page: source, stage, and that every live value in the notes exists. */
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
  const problems = page.value.values
    .filter(({ name }) => !stage.value.slots.has(name))
    .map(({ name, line, column }): Problem => ({
      code: 'page-not-read',
      detail: `“${name}” is not a part, result or condition of this block.`,
      line,
      column,
    }))
  if (problems.length) return { ok: false, problems: problems as [Problem, ...Problem[]] }
  return { ok: true, value: { page: page.value, stage: stage.value } }
}
