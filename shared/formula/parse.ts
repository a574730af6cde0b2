import type { MathNode } from 'mathjs/number'
import { create, parseDependencies } from 'mathjs/number'
import type { Problem, Reading } from '../problems'
import { unread } from '../problems'
import type { Token } from './scan'
import { scan } from './scan'
import type { ArithmeticOperator, ComparisonOperator, LogicOperator, Tree } from './tree'
import type { FunctionName, OpampDatum } from './vocabulary'
import { COMPLEX_FUNCTIONS, CONSTANTS, FUNCTIONS, OPAMP_DATA } from './vocabulary'

/** A value, a yes or no of a limit, or H(s). */
export type FormulaKind = 'value' | 'condition' | 'response'

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
 * Reads a formula of the closed language.
 * @param text for example `1/(2*pi*Rf*Cf)`, `f_c > 200 kHz`, `-(Rf/Ri)/(1 + s*Rf*Cf)`
 * @returns the tree, or problems with line 1 and the column
 */
export function parseFormula(text: string, options: { kind: FormulaKind }): Reading<Formula> {
  const tokens = scan(text)
  if (!tokens.ok) return tokens
  const atoms = tokens.value.filter((token) => token.kind === 'number' || token.kind === 'name')
  const closed = tokens.value.map((token) => closedText(token, atoms)).join(' ')
  let parsed: MathNode
  try {
    parsed = parse(closed)
  } catch {
    return unread('formula-not-read', `“${text}” is not complete: an operator or a value is missing or doubled.`, {
      line: 1,
      column: tokens.value.at(-1)!.column,
    })
  }
  const converter = new Converter(atoms, options.kind)
  const tree = converter.convert(parsed)
  if (tree && options.kind === 'condition' && !isCondition(tree))
    converter.complain('A condition compares: f_c > 200 kHz.', 1)
  if (tree && options.kind !== 'condition' && isCondition(tree)) converter.complain('A comparison is no value.', 1)
  if (!tree || converter.problems.length)
    return {
      ok: false,
      problems: (converter.problems.length
        ? converter.problems
        : [{ code: 'formula-not-read', detail: `“${text}” was not understood.`, line: 1, column: 1 }]) as [
        Problem,
        ...Problem[],
      ],
    }
  return { ok: true, value: { text, kind: options.kind, tree, names: converter.names, opampData: converter.opampData } }
}

/** Each atom goes to the parser as a name of ours, so that no word of its own can be reached. */
const closedText = (token: Token, atoms: Token[]) =>
  token.kind === 'number' || token.kind === 'name' ? `a${atoms.indexOf(token)}_` : token.text

const isCondition = (tree: Tree) => tree.type === 'comparison' || tree.type === 'logic' || tree.type === 'not'

const ARITHMETIC: Record<string, ArithmeticOperator> = { add: '+', subtract: '-', multiply: '*', divide: '/', pow: '^' }
const COMPARISON: Record<string, ComparisonOperator> = {
  smaller: '<',
  smallerEq: '<=',
  larger: '>',
  largerEq: '>=',
  equal: '==',
  unequal: '!=',
}
const LOGIC: Record<string, LogicOperator> = { and: 'and', or: 'or' }

interface NodeLike {
  type: string
  name?: string
  fn?: string | { name: string }
  args?: NodeLike[]
  content?: NodeLike
}

/** Turns the parser's tree into ours, taking only the node types and functions of the closed list. */
class Converter {
  readonly problems: Problem[] = []
  readonly names = new Set<string>()
  readonly opampData: Formula['opampData'] = []

  constructor(
    private readonly atoms: Token[],
    private readonly kind: FormulaKind,
  ) {}

  complain(detail: string, column: number): null {
    this.problems.push({ code: 'formula-not-read', detail, line: 1, column })
    return null
  }

  convert(node: MathNode | NodeLike): Tree | null {
    const one = node as NodeLike
    switch (one.type) {
      case 'ParenthesisNode':
        return this.convert(one.content!)
      case 'SymbolNode':
        return this.atom(one.name!)
      case 'FunctionNode':
        return this.call(typeof one.fn === 'string' ? one.fn : one.fn!.name, one.args ?? [])
      case 'OperatorNode':
        return this.operator(one.fn as string, one.args ?? [])
      case 'RelationalNode':
        return this.complain('Compare two values at a time, joined by “and”.', 1)
      default:
        return this.complain('This form has no meaning in a formula.', 1)
    }
  }

  private token(internal: string): Token {
    return this.atoms[Number(internal.slice(1, -1))]!
  }

  private atom(internal: string): Tree | null {
    const token = this.token(internal)
    if (token.kind === 'number') {
      const { value, unit, prefixed, text, column } = token
      return { type: 'number', value: value!, unit: unit ?? null, prefixed: prefixed ?? false, text, column }
    }
    if (Object.hasOwn(FUNCTIONS, token.text))
      return this.complain(`${token.text} is a function: ${token.text}(…).`, token.column)
    if (!Object.hasOwn(CONSTANTS, token.text) && !(this.kind === 'response' && token.text === 's'))
      this.names.add(token.text)
    return { type: 'name', name: token.text, column: token.column }
  }

  private call(internal: string, args: NodeLike[]): Tree | null {
    const { text, column } = this.token(internal)
    if (Object.hasOwn(OPAMP_DATA, text)) return this.datum(text as OpampDatum, args, column)
    if (!Object.hasOwn(FUNCTIONS, text)) return this.complain(`There is no function ${text}.`, column)
    const name = text as FunctionName
    if (this.kind === 'response' && !COMPLEX_FUNCTIONS.includes(name))
      return this.complain(`${name} cannot be used in a response.`, column)
    const [least, most] = FUNCTIONS[name]
    if (args.length < least || args.length > most)
      return this.complain(
        `${name} takes ${least === most ? least : `${least} to ${most}`} argument${most === 1 ? '' : 's'}.`,
        column,
      )
    const trees = args.map((arg) => this.convert(arg))
    return trees.includes(null) ? null : { type: 'call', name, args: trees as Tree[], column }
  }

  private datum(datum: OpampDatum, args: NodeLike[], column: number): Tree | null {
    const token = args.length === 1 && args[0]!.type === 'SymbolNode' ? this.token(args[0]!.name!) : null
    if (!token || !/^U[A-Za-z0-9_]*$/.test(token.text))
      return this.complain(`${datum} is of an op-amp: ${datum}(U1).`, column)
    this.opampData.push({ datum, ref: token.text })
    return { type: 'opamp', datum, ref: token.text, column }
  }

  private operator(fn: string, args: NodeLike[]): Tree | null {
    if (fn === 'unaryPlus') return this.convert(args[0]!)
    if (fn === 'unaryMinus' || fn === 'not') {
      const arg = this.convert(args[0]!)
      return arg && { type: fn === 'not' ? 'not' : 'minus', arg }
    }
    const left = args[0] && this.convert(args[0])
    const right = args[1] && this.convert(args[1])
    if (!left || !right) return null
    if (Object.hasOwn(ARITHMETIC, fn)) return { type: 'arithmetic', operator: ARITHMETIC[fn]!, left, right }
    if (Object.hasOwn(COMPARISON, fn)) return { type: 'comparison', operator: COMPARISON[fn]!, left, right }
    if (Object.hasOwn(LOGIC, fn)) return { type: 'logic', operator: LOGIC[fn]!, left, right }
    return this.complain('This operator has no meaning in a formula.', 1)
  }
}
