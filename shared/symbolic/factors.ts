import { greatestCommonDivisor, greatestCommonDivisorOf } from './common-factor'
import type { Polynomial } from './polynomial'
import {
  coefficientsIn,
  commonMonomial,
  constant,
  contentOf,
  degreeIn,
  derivativeIn,
  divideExactly,
  isConstant,
  leadingTerm,
  timesTerm,
  variablesOf,
} from './polynomial'

/** whole·monomial·Πfactors. */
export interface Factored {
  whole: bigint
  monomial: bigint
  /** Without whole number and monomial, none constant; a repeated one occurs as often. */
  factors: Polynomial[]
}

/**
 * Splits off whatever one variable shows: factors that do not hold it, and repeated ones. This is complete for
 * polynomials of first degree in each part, as those of circuits are where every part has its own name: their factors
 * have no part in common. A factor begins with a plus in its lowest power of s.
 */
export function factored(p: Polynomial): Factored {
  if (p.size === 0) return { whole: 0n, monomial: 0n, factors: [] }
  const monomial = commonMonomial(p)
  const content = contentOf(p)
  let whole = content
  const factors: Polynomial[] = []
  for (const one of split(divideExactly(p, timesTerm(constant(content), monomial))!)) {
    const negative = isConstant(one) ? one.get(0n)! < 0n : beginsNegative(one)
    if (negative) whole = -whole
    if (!isConstant(one)) factors.push(negative ? timesTerm(one, 0n, -1n) : one)
  }
  return { whole, monomial, factors }
}

/** Factors whose product is p, a constant among them perhaps. */
function split(p: Polynomial): Polynomial[] {
  if (isConstant(p) || p.size === 1) return [p]
  for (const variable of variablesOf(p)) {
    const divisor = commonOf(p, variable)
    if (!isConstant(divisor)) return [...split(divisor), ...split(divideExactly(p, divisor)!)]
  }
  return [p]
}

function commonOf(p: Polynomial, variable: number): Polynomial {
  const content = greatestCommonDivisorOf(coefficientsIn(p, variable))
  if (!isConstant(content) || degreeIn(p, variable) < 2) return content
  return greatestCommonDivisor(p, derivativeIn(p, variable))
}

function beginsNegative(p: Polynomial): boolean {
  const lowest = coefficientsIn(p, 0).find((coefficient) => coefficient.size > 0)!
  let balance = 0
  for (const coefficient of lowest.values()) balance += coefficient > 0n ? 1 : -1
  return balance < 0 || (balance === 0 && leadingTerm(lowest)[1] < 0n)
}
