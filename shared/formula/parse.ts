import type { MathNode } from 'mathjs/number'
import { create, parseDependencies } from 'mathjs/number'
import type { Reading } from '../problems'
import { unread } from '../problems'
import { Converter } from './convert'
import { placeAt, quoted } from './place'
import type { Token } from './scan'
import { scan } from './scan'
import type { FormulaKind, Tree } from './tree'
import type { OpampDatum } from './vocabulary'

export type { FormulaKind } from './tree'

export interface Formula {
  text: string
  kind: FormulaKind
  tree: Tree
  /** Names that are not constants; `s` in a response is not among them. */
  names: Set<string>
  /** Op-amp data used. */
  opampData: { datum: OpampDatum; ref: string }[]
}

// Only the parser is taken from the package: what people write is evaluated by the closed compilers beside this file.
const { parse } = create(parseDependencies!, {}) as unknown as { parse: (text: string) => MathNode }

/**
 * Reads a formula of the closed language. Time grows linearly with length; at most 2000 characters, 600 tokens and
 * parentheses 50 deep.
 *
 * A number may carry an SI prefix, a unit or a letter code: `30k`, `2.4 kHz`, `4k7`, `25 ppm`. With a prefix and no
 * unit it fits any dimension. `1/30k` is 1/(30 000); every other product is written with `*`.
 *
 * @param text for example `1/(2*pi*Rf*Cf)`, `f_c > 200 kHz`, `-(Rf/Ri)/(1 + s*Rf*Cf)`
 * @returns the tree, or 'formula-not-read' problems with line and column
 * @example parseFormula('1/(2*pi*Rf*Cf)', { kind: 'value' }) // { ok: true, value: { names: Set { 'Rf', 'Cf' }, … } }
 */
export function parseFormula(text: string, options: { kind: FormulaKind }): Reading<Formula> {
  const { kind } = options
  const scanned = scan(text, kind)
  if (!scanned.ok) return scanned
  const tokens = scanned.value
  const closed = closedText(tokens)
  let parsed: MathNode
  try {
    parsed = parse(closed.text)
  } catch (error) {
    const detail = `${quoted(text)} is not complete: an operator or a value is missing or doubled.`
    return unread('formula-not-read', detail, placeAt(text, columnOfError(error, closed.starts, tokens)))
  }
  const converter = new Converter(text, kind, closed.atoms)
  const tree = kind === 'condition' ? converter.truth(parsed) : converter.value(parsed)
  const [first, ...more] = converter.problems
  if (first) return { ok: false, problems: [first, ...more] }
  if (!tree) return unread('formula-not-read', `${quoted(text)} was not understood.`, { line: 1, column: 1 })
  return { ok: true, value: { text, kind, tree, names: converter.names, opampData: converter.opampData } }
}

/** Each atom goes to the parser as a name of ours, so that no word of its own can be reached. */
function closedText(tokens: Token[]): { text: string; atoms: Token[]; starts: number[] } {
  const atoms: Token[] = []
  const starts: number[] = []
  let text = ''
  for (const token of tokens) {
    starts.push(text.length)
    if (token.kind === 'number' || token.kind === 'name') text += `a${atoms.push(token) - 1}_ `
    else text += `${token.text} `
  }
  return { text, atoms, starts }
}

/** Column of the token at which the parser stopped; of the last one when it wanted more. */
function columnOfError(error: unknown, starts: number[], tokens: Token[]): number {
  const char = (error as { char?: unknown }).char
  const at = typeof char === 'number' ? starts.findLastIndex((start) => start < char) : -1
  return (tokens[at] ?? tokens.at(-1)!).column
}
