import type { Formula } from '../formula/parse'
import type { Tree } from '../formula/tree'
import { wholeExponent } from '../formula/tree'
import { ProblemError } from '../problems'
import type { ExactRatio } from './exact-ratio'
import { NotRational, RatioArithmetic, exactNumber, inverse, negative } from './exact-ratio'
import { ONE, equalPolynomials, variablePolynomial } from './polynomial'
import { SquareRoots } from './square-roots'
import type { SymbolicTransferFunction } from './transfer-function'

/** Outcome of an exact comparison; where it is 'not rational', sample points must decide. */
export type ExactComparison = 'equal' | 'differs' | 'not rational'

/**
 * Holds a formula against H(s) exactly, both multiplied out: no rounding, no sample points. The page's own results are
 * put in, square roots and π included; numbers count as the decimals they are written as.
 *
 * @param formula `response` of a page, in s, parts and results
 * @param results formulas of the page's results by name; those found on the circuit are left out
 * @returns 'not rational' where another function, an op-amp's datum, a name without formula or a root of s takes part,
 *   and where multiplying out would take too long
 * @example compareExactly(h, valueOf(parseFormula('-(Rf/Ri)/(1 + s*Rf*Cf)', { kind: 'response' }))) // 'equal'
 */
export function compareExactly(
  h: SymbolicTransferFunction,
  formula: Formula,
  results: ReadonlyMap<string, Formula> = new Map(),
): ExactComparison {
  const reader = new RatioReader(h.variables, results)
  try {
    const { above, below } = reader.read(formula.tree)
    const { arithmetic } = reader
    const [left, right] = [arithmetic.times(above, h.denominator), arithmetic.times(below, h.numerator)]
    return equalPolynomials(left, right) ? 'equal' : 'differs'
  } catch (error) {
    if (error instanceof NotRational) return 'not rational'
    if (error instanceof ProblemError && error.code === 'circuit-too-large') return 'not rational'
    throw error
  }
}

class RatioReader {
  readonly arithmetic: RatioArithmetic
  private readonly roots: SquareRoots
  private readonly indexOf: Map<string, number>
  private count: number
  private readonly known = new Map<string, ExactRatio>()
  private readonly reading = new Set<string>()

  constructor(
    variables: readonly string[],
    private readonly results: ReadonlyMap<string, Formula>,
  ) {
    this.indexOf = new Map(variables.map((name, k) => [name, k]))
    this.count = variables.length
    this.roots = new SquareRoots(() => this.count++)
    this.arithmetic = new RatioArithmetic((p) => this.roots.reduce(p))
  }

  read(tree: Tree): ExactRatio {
    const { arithmetic } = this
    switch (tree.type) {
      case 'number':
        return exactNumber(tree.value)
      case 'name':
        return this.name(tree.name)
      case 'minus':
        return negative(this.read(tree.arg))
      case 'call': {
        if (tree.name !== 'sqrt' && tree.name !== 'par' && tree.name !== 'ser') throw new NotRational(tree.name)
        const args = tree.args.map((arg) => this.read(arg))
        if (tree.name === 'sqrt') return this.roots.rootOf(args[0]!)
        if (tree.name === 'ser') return args.reduce((a, b) => arithmetic.sum(a, b))
        return inverse(args.map(inverse).reduce((a, b) => arithmetic.sum(a, b)))
      }
      case 'arithmetic': {
        if (tree.operator === '^') return this.power(tree.left, tree.right)
        const [a, b] = [this.read(tree.left), this.read(tree.right)]
        if (tree.operator === '+') return arithmetic.sum(a, b)
        if (tree.operator === '-') return arithmetic.sum(a, b, -1n)
        return arithmetic.product(a, tree.operator === '*' ? b : inverse(b))
      }
      default:
        throw new NotRational(tree.type)
    }
  }

  private power(base: Tree, exponent: Tree): ExactRatio {
    const whole = wholeExponent(exponent)
    if (whole !== null) return this.arithmetic.power(this.read(base), whole)
    if (exponent.type === 'number' && exponent.unit === null && exponent.value === 0.5)
      return this.roots.rootOf(this.read(base))
    throw new NotRational('power')
  }

  private name(name: string): ExactRatio {
    const index = this.indexOf.get(name)
    if (index !== undefined) return variableRatio(index)
    if (name === 'pi') {
      this.indexOf.set(name, this.count)
      return variableRatio(this.count++)
    }
    const known = this.known.get(name)
    if (known) return known
    const formula = this.results.get(name)
    if (!formula || this.reading.has(name)) throw new NotRational(name)
    this.reading.add(name)
    const found = this.read(formula.tree)
    this.reading.delete(name)
    this.known.set(name, found)
    return found
  }
}

const variableRatio = (index: number): ExactRatio => ({ above: variablePolynomial(index), below: ONE, weight: 1 })
