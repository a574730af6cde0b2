import type { Evaluate } from '../formula/compile'
import { compileFormula } from '../formula/compile'
import type { Formula } from '../formula/parse'
import type { Tree } from '../formula/tree'
import { wholeExponent } from '../formula/tree'

/** Beyond this the coefficients of a ratio not yet reduced could leave the range of a double. */
const DEGREE_MOST = 8

/** Ascending powers of s; filled anew for each set of values. */
interface Ratio {
  num: Float64Array
  den: Float64Array
  fill: (values: Float64Array) => void
}

/** |H(jω)|² at frequencies for one set of values. */
export type SquaredMagnitude = (values: Float64Array, squaredRate: Float64Array, out: Float64Array) => void

/**
 * Compiles a response formula that is rational in s into two polynomials, whose coefficients are computed once a set of
 * values and not once a frequency.
 * @param names what each place of the vector holds
 * @returns |H|² at given ω², (rad/s)²; null when the formula has a root, is not rational in s, or its degree is above 8
 * @throws {ProblemError} 'formula-not-read' when a name is not in the vector
 */
export function compileSquaredMagnitude(formula: Formula, names: readonly string[]): SquaredMagnitude | null {
  const real = (tree: Tree): Evaluate => compileFormula({ ...formula, kind: 'value', tree }, names)
  // A root of what turns negative is imaginary, which coefficients that are real cannot hold.
  const ratio = some(formula.tree, isRoot) ? null : ratioOf(formula.tree, real)
  if (!ratio) return null
  const { num, den, fill } = ratio
  return (values, squaredRate, out) => {
    fill(values)
    squaredInto(num, squaredRate, out.fill(1), false)
    squaredInto(den, squaredRate, out, true)
  }
}

/**
 * Multiplies or divides by |P(jω)|²: even powers make the real part, odd ones the imaginary part. Up to the fourth
 * degree, which covers most blocks, the coefficients stay in registers.
 */
function squaredInto(p: Float64Array, squaredRate: Float64Array, out: Float64Array, divide: boolean) {
  const short = p.length <= 5
  const at = (k: number) => p[k] ?? 0
  const [p0, p1, p2, p3, p4] = [at(0), at(1), at(2), at(3), at(4)]
  for (let k = 0; k < out.length; k++) {
    const x = squaredRate[k]!
    const even = short ? p0 - x * (p2 - x * p4) : horner(p, 0, x)
    const odd = short ? p1 - x * p3 : horner(p, 1, x)
    const size = even * even + x * odd * odd
    out[k] = divide ? out[k]! / size : out[k]! * size
  }
}

/** p₀ − x·(p₂ − x·(p₄ − …)) from the first coefficient given. */
function horner(p: Float64Array, first: 0 | 1, x: number): number {
  let sum = 0
  for (let k = p.length - 1 - ((p.length - 1 - first) & 1); k >= first; k -= 2) sum = p[k]! - x * sum
  return sum
}

function ratioOf(tree: Tree, real: (tree: Tree) => Evaluate): Ratio | null {
  if (!usesS(tree)) return constant(real(tree))
  switch (tree.type) {
    case 'name':
      return { num: Float64Array.of(0, 1), den: Float64Array.of(1), fill: () => {} }
    case 'minus': {
      const arg = ratioOf(tree.arg, real)
      return (
        arg &&
        product(
          constant(() => -1),
          arg,
        )
      )
    }
    case 'call': {
      if (tree.name !== 'par' && tree.name !== 'ser') return null
      const args = tree.args.map((arg) => ratioOf(arg, real))
      const turned = tree.name === 'par' ? args.map(inverse) : args
      const total = turned.reduce((a, b) => a && b && sum(a, b))
      return tree.name === 'par' ? inverse(total ?? null) : (total ?? null)
    }
    case 'arithmetic': {
      const a = ratioOf(tree.left, real)
      if (!a) return null
      if (tree.operator === '^') return power(a, wholeExponent(tree.right))
      const b = ratioOf(tree.right, real)
      if (!b) return null
      if (tree.operator === '*') return product(a, b)
      if (tree.operator === '/') return product(a, inverse(b)!)
      return sum(a, b, tree.operator === '-' ? -1 : 1)
    }
    default:
      return null
  }
}

const isRoot = (tree: Tree) => tree.type === 'call' && tree.name === 'sqrt'
const isS = (tree: Tree) => tree.type === 'name' && tree.name === 's'
const usesS = (tree: Tree) => some(tree, isS)

function some(tree: Tree, test: (tree: Tree) => boolean): boolean {
  if (test(tree)) return true
  if (tree.type === 'call') return tree.args.some((arg) => some(arg, test))
  if ('arg' in tree) return some(tree.arg, test)
  return 'left' in tree && (some(tree.left, test) || some(tree.right, test))
}

function constant(evaluate: Evaluate): Ratio {
  const num = new Float64Array(1)
  return {
    num,
    den: Float64Array.of(1),
    fill: (values) => {
      num[0] = evaluate(values)
    },
  }
}

const inverse = (a: Ratio | null): Ratio | null => a && { num: a.den, den: a.num, fill: a.fill }

const degreeOf = (...factors: Float64Array[]) => factors.reduce((degree, one) => degree + one.length - 1, 0)
const tooHigh = (degree: number) => degree > DEGREE_MOST

function product(a: Ratio, b: Ratio): Ratio | null {
  const [top, bottom] = [degreeOf(a.num, b.num), degreeOf(a.den, b.den)]
  if (tooHigh(top) || tooHigh(bottom)) return null
  const [num, den] = [new Float64Array(top + 1), new Float64Array(bottom + 1)]
  return {
    num,
    den,
    fill: (values) => {
      a.fill(values)
      b.fill(values)
      addProduct(a.num, b.num, num.fill(0), 1)
      addProduct(a.den, b.den, den.fill(0), 1)
    },
  }
}

function sum(a: Ratio, b: Ratio, sign = 1): Ratio | null {
  const top = Math.max(degreeOf(a.num, b.den), degreeOf(b.num, a.den))
  const bottom = degreeOf(a.den, b.den)
  if (tooHigh(top) || tooHigh(bottom)) return null
  const [num, den] = [new Float64Array(top + 1), new Float64Array(bottom + 1)]
  return {
    num,
    den,
    fill: (values) => {
      a.fill(values)
      b.fill(values)
      addProduct(a.num, b.den, num.fill(0), 1)
      addProduct(b.num, a.den, num, sign)
      addProduct(a.den, b.den, den.fill(0), 1)
    },
  }
}

function power(a: Ratio, exponent: number | null): Ratio | null {
  if (exponent === null) return null
  const base = exponent < 0 ? inverse(a)! : a
  let found: Ratio | null = constant(() => 1)
  for (let k = 0; k < Math.abs(exponent); k++) found = found && product(found, base)
  return found
}

function addProduct(a: Float64Array, b: Float64Array, to: Float64Array, sign: number) {
  for (let i = 0; i < a.length; i++) {
    const x = sign * a[i]!
    if (x !== 0) for (let j = 0; j < b.length; j++) to[i + j]! += x * b[j]!
  }
}
