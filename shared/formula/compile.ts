import { ProblemError } from '../problems'
import { nearName } from './near-name'
import type { Formula } from './parse'
import { placeAt } from './place'
import type { ComparisonOperator, Tree } from './tree'
import type { FunctionName, OpampDatum } from './vocabulary'
import { CONSTANTS } from './vocabulary'

export type Evaluate = (values: Float64Array) => number

/** Gives a datum of the op-amp chosen, or undefined when none is. */
export type OpampData = (datum: OpampDatum, ref: string) => number | undefined

/**
 * Compiles a value formula into closures over one vector.
 * @param names what each place of the vector holds
 * @returns the value in SI units; NaN where it is not defined
 * @throws {ProblemError} 'formula-not-read' when a name is not in the vector
 */
export function compileFormula(formula: Formula, names: readonly string[], opamps?: OpampData): Evaluate {
  return real(formula.tree, slotFinder(formula.text, names), opamps)
}

/**
 * Compiles a condition. A comparison with a value that is not defined holds in neither direction, so `not` of it is
 * false too.
 * @throws {ProblemError} 'formula-not-read' when a name is not in the vector
 */
export function compileCondition(
  formula: Formula,
  names: readonly string[],
  opamps?: OpampData,
): (values: Float64Array) => boolean {
  return truth(formula.tree, slotFinder(formula.text, names), opamps, false)
}

/**
 * Evaluates once, by names.
 * @throws {ProblemError} 'formula-not-read' when a name has no value
 */
export function evaluateOnce(formula: Formula, values: Readonly<Record<string, number>>): number {
  const names = Object.keys(values)
  return compileFormula(formula, names)(Float64Array.from(names, (name) => values[name]!))
}

type SlotOf = (name: string, column: number) => number

/** Finds the place of a name in the vector, or says which name is near. */
export function slotFinder(text: string, names: readonly string[]): SlotOf {
  return (name, column) => {
    const slot = names.indexOf(name)
    if (slot >= 0) return slot
    const near = nearName(name, names)
    const detail = `“${name}” is not a part, result or condition here.${near ? ` Did you mean ${near}?` : ''}`
    throw new ProblemError('formula-not-read', detail, placeAt(text, column))
  }
}

function real(tree: Tree, slotOf: SlotOf, opamps?: OpampData): Evaluate {
  switch (tree.type) {
    case 'number': {
      const { value } = tree
      return () => value
    }
    case 'name': {
      if (Object.hasOwn(CONSTANTS, tree.name)) {
        const constant = CONSTANTS[tree.name as keyof typeof CONSTANTS]
        return () => constant
      }
      const slot = slotOf(tree.name, tree.column)
      return (v) => v[slot]!
    }
    case 'opamp':
      return () => opamps?.(tree.datum, tree.ref) ?? NaN
    case 'minus': {
      const arg = real(tree.arg, slotOf, opamps)
      return (v) => -arg(v)
    }
    case 'call':
      return call(
        tree.name,
        tree.args.map((arg) => real(arg, slotOf, opamps)),
      )
    case 'arithmetic':
      return arithmetic(tree, real(tree.left, slotOf, opamps), real(tree.right, slotOf, opamps))
    default:
      throw new ProblemError('formula-not-read', 'A comparison is no value.', { line: 1, column: 1 })
  }
}

function arithmetic(tree: Tree & { type: 'arithmetic' }, a: Evaluate, b: Evaluate): Evaluate {
  switch (tree.operator) {
    case '+':
      return (v) => a(v) + b(v)
    case '-':
      return (v) => a(v) - b(v)
    case '*':
      return (v) => a(v) * b(v)
    case '/':
      return (v) => a(v) / b(v)
    case '^':
      return tree.right.type === 'number' && tree.right.value === 2 ? (v) => a(v) ** 2 : (v) => a(v) ** b(v)
  }
}

function call(name: FunctionName, args: Evaluate[]): Evaluate {
  const [a, b] = args as [Evaluate, Evaluate]
  switch (name) {
    case 'sqrt':
      return (v) => Math.sqrt(a(v))
    case 'abs':
      return (v) => Math.abs(a(v))
    case 'exp':
      return (v) => Math.exp(a(v))
    case 'ln':
      return (v) => Math.log(a(v))
    case 'log10':
      return (v) => Math.log10(a(v))
    case 'sin':
      return (v) => Math.sin(a(v))
    case 'cos':
      return (v) => Math.cos(a(v))
    case 'tan':
      return (v) => Math.tan(a(v))
    case 'atan':
      return (v) => Math.atan(a(v))
    case 'atan2':
      return (v) => Math.atan2(a(v), b(v))
    case 'min':
      return folded(args, (a, b) => Math.min(a, b))
    case 'max':
      return folded(args, (a, b) => Math.max(a, b))
    case 'ser':
      return folded(args, (a, b) => a + b)
    case 'par': {
      const admittance = folded(
        args.map((arg) => (v: Float64Array) => 1 / arg(v)),
        (a, b) => a + b,
      )
      return (v) => 1 / admittance(v)
    }
    case 'dB':
      return (v) => 20 * Math.log10(Math.abs(a(v)))
  }
}

/** Arguments taken together two by two, without a list on every call. */
const folded = (args: Evaluate[], join: (a: number, b: number) => number): Evaluate =>
  args.reduce((before, arg) => (v) => join(before(v), arg(v)))

const OPPOSITE: Record<ComparisonOperator, ComparisonOperator> = {
  '<': '>=',
  '<=': '>',
  '>': '<=',
  '>=': '<',
  '==': '!=',
  '!=': '==',
}

/** @param negated the opposite is wanted; `not` is carried down to the comparisons, where NaN fails both ways */
function truth(
  tree: Tree,
  slotOf: SlotOf,
  opamps: OpampData | undefined,
  negated: boolean,
): (v: Float64Array) => boolean {
  if (tree.type === 'not') return truth(tree.arg, slotOf, opamps, !negated)
  if (tree.type === 'logic') {
    const left = truth(tree.left, slotOf, opamps, negated)
    const right = truth(tree.right, slotOf, opamps, negated)
    return (tree.operator === 'and') !== negated ? (v) => left(v) && right(v) : (v) => left(v) || right(v)
  }
  if (tree.type !== 'comparison')
    throw new ProblemError('formula-not-read', 'A condition compares: f_c > 200 kHz.', { line: 1, column: 1 })
  const a = real(tree.left, slotOf, opamps)
  const b = real(tree.right, slotOf, opamps)
  switch (negated ? OPPOSITE[tree.operator] : tree.operator) {
    case '<':
      return (v) => a(v) < b(v)
    case '<=':
      return (v) => a(v) <= b(v)
    case '>':
      return (v) => a(v) > b(v)
    case '>=':
      return (v) => a(v) >= b(v)
    case '==':
      return (v) => a(v) === b(v)
    case '!=':
      return (v) => {
        const x = a(v)
        const y = b(v)
        return x < y || x > y
      }
  }
}
