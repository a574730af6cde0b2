import { greatestCommonDivisor } from './common-factor'
import type { ExactRatio } from './exact-ratio'
import { NotRational } from './exact-ratio'
import { factored } from './factors'
import type { Polynomial } from './polynomial'
import {
  ONE,
  ZERO,
  addScaled,
  coefficientsIn,
  constant,
  degreeIn,
  equalPolynomials,
  exponentIn,
  exponentsOf,
  isConstant,
  multiply,
  power,
  timesTerm,
  variablePolynomial,
} from './polynomial'

/**
 * Square roots as variables of their own: √f is a variable r with r² = f, one for each prime number, each part and each
 * sum. Radicands without square factors and without a factor in common have independent roots, so that an expression in
 * them is zero only when every coefficient is. Parts count as positive.
 *
 * Source: A. S. Besicovitch, J. London Math. Soc. 15 (1940) 3 (independence of the roots).
 */
export class SquareRoots {
  private readonly radicands = new Map<number, Polynomial>()

  /** @param newVariable makes a variable and gives its index */
  constructor(private readonly newVariable: () => number) {}

  /** √(above/below). @throws {NotRational} where the radicand has s, another root or a sign that is not known */
  rootOf({ above, below, weight }: ExactRatio): ExactRatio {
    const sign = signOf(below)
    if (sign === 0) throw new NotRational('sign not known')
    const [p, q] = [above, below].map((one) => timesTerm(one, 0n, sign < 0 ? -1n : 1n)) as [Polynomial, Polynomial]
    return { above: this.rootOfPolynomial(multiply(p, q)), below: q, weight: 2 * weight }
  }

  /** Even powers of the roots put in. */
  reduce(p: Polynomial): Polynomial {
    let reduced = p
    for (const [variable, radicand] of this.radicands) {
      if (degreeIn(reduced, variable) < 2) continue
      const root = variablePolynomial(variable)
      reduced = coefficientsIn(reduced, variable).reduce(
        (sum, coefficient, k) =>
          addScaled(sum, multiply(multiply(coefficient, power(radicand, k >> 1)), k % 2 ? root : ONE)),
        ZERO,
      )
    }
    return reduced
  }

  private rootOfPolynomial(p: Polynomial): Polynomial {
    if (p.size === 0) return ZERO
    const known = new Set([0, ...this.radicands.keys()])
    for (const monomial of p.keys())
      for (const variable of known)
        if (exponentIn(monomial, variable) > 0) throw new NotRational('root of s or of a root')
    const { whole, monomial, factors } = factored(p)
    let root = this.rootOfWhole(whole)
    exponentsOf(monomial).forEach((k, i) => {
      root = multiply(root, power(variablePolynomial(i), k >> 1))
      if (k % 2) root = multiply(root, this.variableFor(variablePolynomial(i)))
    })
    let unsure = ONE
    const left = [...factors]
    while (left.length) {
      const one = left.pop()!
      const twin = left.findIndex((other) => equalPolynomials(one, other))
      const positive = signOf(one) > 0
      if (twin >= 0) {
        if (!positive) throw new NotRational('sign not known')
        left.splice(twin, 1)
        root = multiply(root, one)
      } else if (positive) root = multiply(root, this.variableFor(one))
      else unsure = multiply(unsure, one)
    }
    return isConstant(unsure) ? root : multiply(root, this.variableFor(unsure))
  }

  private rootOfWhole(whole: bigint): Polynomial {
    if (whole < 0n) throw new NotRational('negative radicand')
    let root = ONE
    let rest = whole
    for (let prime = 2n; prime < 1000n; prime++) {
      let count = 0
      for (; rest % prime === 0n; rest /= prime) count++
      root = timesTerm(root, 0n, prime ** BigInt(count >> 1))
      if (count % 2) root = multiply(root, this.variableFor(constant(prime)))
    }
    if (rest === 1n) return root
    if (rest >= 1_000_000n) throw new NotRational('large radicand')
    return multiply(root, this.variableFor(constant(rest)))
  }

  private variableFor(radicand: Polynomial): Polynomial {
    for (const [variable, known] of this.radicands) {
      if (equalPolynomials(known, radicand)) return variablePolynomial(variable)
      const common = greatestCommonDivisor(known, radicand)
      if (!equalPolynomials(common, ONE)) throw new NotRational('roots that hang together')
    }
    const variable = this.newVariable()
    this.radicands.set(variable, radicand)
    return variablePolynomial(variable)
  }
}

/** 1 or −1 where all terms have that sign, else 0. */
function signOf(p: Polynomial): number {
  const signs = new Set([...p.values()].map((c) => (c > 0n ? 1 : -1)))
  return signs.size === 1 ? [...signs][0]! : 0
}
