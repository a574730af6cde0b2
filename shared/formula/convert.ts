import type { Problem } from '../problems'
import { placeAt } from './place'
import type { Token } from './scan'
import type { ArithmeticOperator, ComparisonOperator, FormulaKind, LogicOperator, Tree } from './tree'
import { wholeExponent } from './tree'
import type { FunctionName, OpampDatum } from './vocabulary'
import { COMPLEX_FUNCTIONS, CONSTANTS, FUNCTIONS, OPAMP_DATA } from './vocabulary'

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

/** As much of the parser's nodes as is looked at. */
export interface ParsedNode {
  type: string
  name?: string
  fn?: string | { name: string }
  args?: ParsedNode[]
  content?: ParsedNode
  params?: ParsedNode[]
}

/** Turns the parser's tree into ours, taking only the node types and functions of the closed list. */
export class Converter {
  readonly problems: Problem[] = []
  readonly names = new Set<string>()
  readonly opampData: { datum: OpampDatum; ref: string }[] = []

  constructor(
    private readonly text: string,
    private readonly kind: FormulaKind,
    private readonly atoms: Token[],
  ) {}

  private complain(detail: string, column: number): null {
    this.problems.push({ code: 'formula-not-read', detail, ...placeAt(this.text, column) })
    return null
  }

  /** A tree that gives a number. */
  value(node: ParsedNode): Tree | null {
    switch (node.type) {
      case 'ParenthesisNode':
        return this.value(node.content!)
      case 'SymbolNode':
        return this.atom(node.name!)
      case 'FunctionNode':
        return this.call(typeof node.fn === 'string' ? node.fn : node.fn!.name, node.args ?? [])
      case 'OperatorNode':
        return this.arithmetic(node, node.fn as string, node.args ?? [])
      default:
        return this.complain('A comparison is no value.', this.columnOf(node))
    }
  }

  /** A tree that gives yes or no. */
  truth(node: ParsedNode): Tree | null {
    const fn = node.type === 'OperatorNode' ? (node.fn as string) : ''
    const [first, second] = node.args ?? []
    if (node.type === 'ParenthesisNode') return this.truth(node.content!)
    if (node.type === 'RelationalNode')
      return this.complain('Compare two values at a time: a < b and b < c.', this.columnOf(node))
    if (fn === 'not') {
      const arg = this.truth(first!)
      return arg && { type: 'not', arg }
    }
    if (Object.hasOwn(LOGIC, fn)) {
      const left = this.truth(first!)
      const right = this.truth(second!)
      return left && right && { type: 'logic', operator: LOGIC[fn]!, left, right }
    }
    if (!Object.hasOwn(COMPARISON, fn))
      return this.complain('A condition compares: f_c > 200 kHz.', this.columnOf(node))
    if (first!.type === 'OperatorNode' && first!.fn === 'not')
      return this.complain('“not” takes the comparison in parentheses: not (a > b).', this.columnOf(first!))
    const left = this.value(first!)
    const right = this.value(second!)
    return left && right && { type: 'comparison', operator: COMPARISON[fn]!, left, right }
  }

  private token(internal: string): Token {
    return this.atoms[Number(internal.slice(1, -1))]!
  }

  /** Column of the first atom of a node. */
  private columnOf(node: ParsedNode): number {
    if (node.type === 'SymbolNode') return this.token(node.name!).column
    if (node.type === 'FunctionNode') return this.token(typeof node.fn === 'string' ? node.fn : node.fn!.name).column
    const first = node.content ?? node.args?.[0] ?? node.params?.[0]
    return first ? this.columnOf(first) : 1
  }

  private atom(internal: string): Tree | null {
    const { literal, text, column } = this.token(internal)
    if (literal) {
      const { value, unit, prefixed } = literal
      return { type: 'number', value, unit, prefixed, text, column }
    }
    if (Object.hasOwn(FUNCTIONS, text)) return this.complain(`${text} is a function: ${text}(…).`, column)
    if (!Object.hasOwn(CONSTANTS, text) && !(this.kind === 'response' && text === 's')) this.names.add(text)
    return { type: 'name', name: text, column }
  }

  private call(internal: string, args: ParsedNode[]): Tree | null {
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
    const trees = args.map((arg) => this.value(arg))
    return trees.includes(null) ? null : { type: 'call', name, args: trees as Tree[], column }
  }

  private datum(datum: OpampDatum, args: ParsedNode[], column: number): Tree | null {
    if (this.kind === 'response')
      return this.complain(`${datum} is for limits and conditions; a response is of parts and s.`, column)
    const token = args.length === 1 && args[0]!.type === 'SymbolNode' ? this.token(args[0]!.name!) : null
    if (!token || !/^U[A-Za-z0-9_]*$/.test(token.text))
      return this.complain(`${datum} is of an op-amp: ${datum}(U1).`, column)
    this.opampData.push({ datum, ref: token.text })
    return { type: 'opamp', datum, ref: token.text, column }
  }

  private arithmetic(node: ParsedNode, fn: string, args: ParsedNode[]): Tree | null {
    if (fn === 'unaryPlus') return this.value(args[0]!)
    if (fn === 'unaryMinus') {
      const arg = this.value(args[0]!)
      return arg && { type: 'minus', arg }
    }
    if (!Object.hasOwn(ARITHMETIC, fn)) return this.complain('A comparison is no value.', this.columnOf(node))
    const left = this.value(args[0]!)
    const right = this.value(args[1]!)
    if (!left || !right) return null
    if (this.kind === 'response' && fn === 'pow' && wholeExponent(right) === null)
      return this.complain('A power in a response is a whole number up to 20, such as s^2.', this.columnOf(args[1]!))
    return { type: 'arithmetic', operator: ARITHMETIC[fn]!, left, right }
  }
}
