import type { CalculatorSource, ResultEntry } from '../contracts/calculator'
import { compileComplexFormula } from '../formula/compile-complex'
import { parseFormula } from '../formula/parse'
import { readPercent } from '../quantities/read'
import { readFigure } from './figure'
import type { ReadingContext } from './reading-context'
import type { StageResponse, StageResult } from './stage'

/** Reads `results`: formulas by dimension, what each must equal on the circuit, and how exact it claims to be. */
export function readResults(context: ReadingContext, source: CalculatorSource, outputs: string[]): StageResult[] {
  const isResult = (name: string) => Object.hasOwn(source.results, name)
  return Object.entries(source.results).flatMap(([name, entry]) => {
    const path = ['results', name]
    if (Object.hasOwn(source.parts, name))
      context.complain(path, `${name} is the name of a part; a result needs another one.`)
    if (entry.formula === undefined && entry.is === undefined)
      context.complain(path, `${name} needs a formula, or an is: that says what to find on the circuit.`)
    const read =
      entry.formula === undefined ? undefined : context.formula([...path, 'formula'], entry.formula, unitOf(entry))
    const is = entry.is === undefined ? undefined : context.take([...path, 'is'], readFigure(entry.is, isResult))
    return [
      {
        name,
        symbol: entry.symbol ?? name,
        unit: unitOf(entry),
        meaning: entry.meaning,
        output: readOutput(context, [...path, 'output'], entry.output, outputs),
        formula: read?.formula ?? null,
        evaluate: read?.evaluate ?? null,
        is: is ?? null,
        isWords: entry.is ?? null,
        approximately: readApproximately(context, path, entry),
      },
    ]
  })
}

export const unitOf = (entry: ResultEntry): string => (entry.unit === 'ohm' ? 'Ω' : entry.unit)

/** The named output, or the first. */
export function readOutput(
  context: ReadingContext,
  path: (string | number)[],
  name: string | undefined,
  outputs: string[],
): string {
  if (name === undefined || outputs.includes(name)) return name ?? outputs[0] ?? 'out'
  context.complain(path, `${name} is not an output of this circuit. It has ${outputs.join(', ')}.`)
  return outputs[0] ?? 'out'
}

function readApproximately(context: ReadingContext, path: string[], entry: ResultEntry): StageResult['approximately'] {
  if (entry.approximately === undefined) {
    if (entry.when !== undefined)
      context.complain([...path, 'when'], 'when: goes with approximately:, which is missing.')
    return null
  }
  const within = context.take([...path, 'approximately'], readPercent(entry.approximately))
  const when = entry.when === undefined ? undefined : context.condition([...path, 'when'], entry.when)
  return within === undefined ? null : { within, when: when?.applies ?? null, whenText: entry.when ?? null }
}

/** Reads `response`: one formula of s for the first output, or one for each named output. */
export function readResponses(context: ReadingContext, source: CalculatorSource, outputs: string[]): StageResponse[] {
  if (source.response === undefined) return []
  const byOutput = typeof source.response === 'string' ? { [outputs[0] ?? 'out']: source.response } : source.response
  return Object.entries(byOutput).flatMap(([output, text]) => {
    const path = typeof source.response === 'string' ? ['response'] : ['response', output]
    readOutput(context, path, output, outputs)
    const formula = context.take(path, parseFormula(text, { kind: 'response' }))
    const evaluate = formula && context.guard(path, () => compileComplexFormula(formula, context.names))
    return formula && evaluate ? [{ output, formula, evaluate }] : []
  })
}

/** Results in the order of computing; a ring of formulas is a problem. */
export function resultOrder(context: ReadingContext, results: StageResult[]): StageResult[] {
  const byName = new Map(results.map((one) => [one.name, one]))
  const done = new Set<string>()
  const order: StageResult[] = []
  const visit = (one: StageResult, above: string[]) => {
    if (done.has(one.name)) return
    if (above.includes(one.name)) {
      context.complain(['results', one.name], `The formulas of ${[...above, one.name].join(' → ')} need each other.`)
      return
    }
    const uses = [...(one.formula?.names ?? []), ...figureResults(one)]
    for (const name of uses) {
      const other = byName.get(name)
      if (other && other !== one) visit(other, [...above, one.name])
      else if (other === one) context.complain(['results', name], `${name} is computed from ${name} itself.`)
    }
    done.add(one.name)
    order.push(one)
  }
  for (const one of results) visit(one, [])
  return order
}

const figureResults = ({ is }: StageResult): string[] =>
  is && 'frequency' in is && is.frequency.at === 'result' ? [is.frequency.result] : []
