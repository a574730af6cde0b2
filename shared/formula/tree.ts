import type { Unit } from '../quantities/unit'
import type { FunctionName, OpampDatum } from './vocabulary'

export type ArithmeticOperator = '+' | '-' | '*' | '/' | '^'
export type ComparisonOperator = '<' | '<=' | '>' | '>=' | '==' | '!='
export type LogicOperator = 'and' | 'or'

/** A value, a yes or no of a limit, or H(s). */
export type FormulaKind = 'value' | 'condition' | 'response'

/** A formula as a tree; columns from 1 through the whole text. */
export type Tree =
  /** A literal: value in SI, unit as written; `prefixed` without a unit fits any dimension. */
  | { type: 'number'; value: number; unit: Unit | null; prefixed: boolean; text: string; column: number }
  | { type: 'name'; name: string; column: number }
  | { type: 'opamp'; datum: OpampDatum; ref: string; column: number }
  | { type: 'call'; name: FunctionName; args: Tree[]; column: number }
  | { type: 'arithmetic'; operator: ArithmeticOperator; left: Tree; right: Tree }
  | { type: 'comparison'; operator: ComparisonOperator; left: Tree; right: Tree }
  | { type: 'logic'; operator: LogicOperator; left: Tree; right: Tree }
  | { type: 'not'; arg: Tree }
  | { type: 'minus'; arg: Tree }

/** First column that a tree covers. */
export function columnOf(tree: Tree): number {
  if ('column' in tree) return tree.column
  return columnOf('left' in tree ? tree.left : tree.arg)
}

const POWER_MAX = 20

/** The whole number that a tree stands for as an exponent, such as 2 or -1; null when it is none up to 20. */
export function wholeExponent(tree: Tree): number | null {
  const sign = tree.type === 'minus' ? -1 : 1
  const size = tree.type === 'minus' ? tree.arg : tree
  if (size.type !== 'number' || size.unit !== null || !Number.isInteger(size.value)) return null
  return size.value <= POWER_MAX ? sign * size.value : null
}
