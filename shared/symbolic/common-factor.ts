import type { Polynomial } from './polynomial'
import {
  ONE,
  ZERO,
  addScaled,
  coefficientsIn,
  commonMonomial,
  constant,
  contentOf,
  degreeIn,
  divideExactly,
  exponentsOf,
  isConstant,
  leadingTerm,
  multiply,
  powerOf,
  timesTerm,
  variablesOf,
  wholeGcd,
} from './polynomial'

/**
 * Greatest common divisor of two polynomials in several variables, exact, its leading coefficient positive. Variables
 * that it cannot hold are found first, by images modulo a prime; the rest goes by primitive remainder sequences, one
 * variable after the other.
 *
 * Source: G. E. Collins, J. ACM 14 (1967) 128; W. S. Brown, J. ACM 18 (1971) 478.
 */
export function greatestCommonDivisor(a: Polynomial, b: Polynomial): Polynomial {
  if (a.size === 0) return positive(b)
  if (b.size === 0) return positive(a)
  const whole = wholeGcd(contentOf(a), contentOf(b))
  const [monomialA, monomialB] = [commonMonomial(a), commonMonomial(b)]
  const rest = primitiveGcd(
    divideExactly(a, timesTerm(constant(contentOf(a)), monomialA))!,
    divideExactly(b, timesTerm(constant(contentOf(b)), monomialB))!,
  )
  const shared = commonMonomial(
    new Map([
      [monomialA, 1n],
      [monomialB, 1n],
    ]),
  )
  return timesTerm(positive(rest), shared, whole)
}

/** Of several; stops as soon as nothing is common. */
export function greatestCommonDivisorOf(list: readonly Polynomial[]): Polynomial {
  const ascending = [...list].sort((p, q) => p.size - q.size)
  let divisor: Polynomial = ZERO
  for (const p of ascending) {
    divisor = greatestCommonDivisor(divisor, p)
    if (divisor.size === 1 && divisor.get(0n) === 1n) break
  }
  return divisor
}

/** p without the whole number common to its coefficients, leading coefficient positive. */
export function primitive(p: Polynomial): Polynomial {
  return p.size === 0 ? p : positive(divideExactly(p, constant(contentOf(p)))!)
}

const positive = (p: Polynomial): Polynomial => (leadingTerm(p)[1] < 0n ? timesTerm(p, 0n, -1n) : p)

/** Of polynomials without common whole number and monomial. */
function primitiveGcd(a: Polynomial, b: Polynomial): Polynomial {
  if (isConstant(a) || isConstant(b)) return ONE
  const [inA, inB] = [variablesOf(a), variablesOf(b)]
  const shared = inA.filter((variable) => inB.includes(variable) && mayShare(a, b, variable))
  if (shared.length === 0) return ONE
  if (shared.length < inA.length || shared.length < inB.length)
    return primitive(greatestCommonDivisorOf([...partsIn(a, shared), ...partsIn(b, shared)]))
  const [small, large] = a.size <= b.size ? [a, b] : [b, a]
  if (divideExactly(large, small)) return small
  const degree = (variable: number) => Math.max(degreeIn(a, variable), degreeIn(b, variable))
  const main = shared.reduce((best, variable) => (degree(variable) < degree(best) ? variable : best))
  const [contentA, contentB] = [a, b].map((p) => greatestCommonDivisorOf(coefficientsIn(p, main))) as [
    Polynomial,
    Polynomial,
  ]
  const common = greatestCommonDivisor(contentA, contentB)
  let [u, v] = [divideExactly(a, contentA)!, divideExactly(b, contentB)!]
  if (degreeIn(u, main) < degreeIn(v, main)) [u, v] = [v, u]
  while (v.size > 0 && degreeIn(v, main) > 0) {
    const remainder = pseudoRemainder(u, v, main)
    u = v
    v = remainder.size === 0 ? ZERO : withoutContent(remainder, main)
  }
  return v.size === 0 ? multiply(common, primitive(u)) : common
}

const withoutContent = (p: Polynomial, main: number) =>
  primitive(divideExactly(p, greatestCommonDivisorOf(coefficientsIn(p, main)))!)

/** Remainder of lead(b)^k·a divided by b in one variable. */
function pseudoRemainder(a: Polynomial, b: Polynomial, variable: number): Polynomial {
  const degree = degreeIn(b, variable)
  const lead = coefficientsIn(b, variable)[degree]!
  let rest = a
  for (let top = degreeIn(rest, variable); rest.size > 0 && top >= degree; top = degreeIn(rest, variable)) {
    const factor = timesTerm(coefficientsIn(rest, variable)[top]!, powerOf(variable, top - degree))
    rest = addScaled(multiply(lead, rest), multiply(factor, b), -1n)
    if (degree === 0) break
  }
  return rest
}

/** Coefficients of p as a polynomial in the variables outside a set: polynomials in those of the set. */
function partsIn(p: Polynomial, inside: readonly number[]): Polynomial[] {
  const parts = new Map<bigint, Map<bigint, bigint>>()
  for (const [monomial, coefficient] of p) {
    const exponents = exponentsOf(monomial)
    const within = inside.reduce((product, k) => product + powerOf(k, exponents[k] ?? 0), 0n)
    const part = parts.get(monomial - within) ?? new Map<bigint, bigint>()
    parts.set(monomial - within, part.set(within, coefficient))
  }
  return [...parts.values()]
}

/** 2²⁶ − 5: products of two residues stay below 2⁵³. */
const PRIME = 67_108_859

/** False only when the common divisor certainly does not hold the variable. */
function mayShare(a: Polynomial, b: Polynomial, variable: number): boolean {
  let [u, v] = [imageOf(a, variable), imageOf(b, variable)]
  if (u.at(-1) === 0 || v.at(-1) === 0) return true
  while (v.length > 1) [u, v] = [v, remainderOf(u, v)]
  return v.length === 0
}

/** p modulo the prime with numbers for all variables but one; ascending powers, up to the degree of p. */
function imageOf(p: Polynomial, variable: number): number[] {
  const image = new Array<number>(degreeIn(p, variable) + 1).fill(0)
  for (const [monomial, coefficient] of p) {
    let value = Number(((coefficient % BigInt(PRIME)) + BigInt(PRIME)) % BigInt(PRIME))
    const exponents = exponentsOf(monomial)
    exponents.forEach((exponent, k) => {
      if (k === variable) return
      for (let j = 0; j < exponent; j++) value = (value * pointOf(k)) % PRIME
    })
    const at = exponents[variable] ?? 0
    image[at] = (image[at]! + value) % PRIME
  }
  return image
}

/** Some number for a variable; any without a pattern would do. */
const pointOf = (variable: number) => ((variable + 3) * 48_611_077 + 7_654_321 * (variable + 1) ** 2) % PRIME

/** Remainder of polynomials modulo the prime, without leading zeros. */
function remainderOf(a: readonly number[], b: readonly number[]): number[] {
  const rest = [...a]
  const inverse = inverseOf(b.at(-1)!)
  for (let k = rest.length - b.length; k >= 0; k--) {
    const factor = (rest[k + b.length - 1]! * inverse) % PRIME
    b.forEach((c, j) => (rest[k + j] = (rest[k + j]! + (PRIME - ((factor * c) % PRIME))) % PRIME))
  }
  while (rest.at(-1) === 0) rest.pop()
  return rest
}

/** By Fermat: x^(p − 2). */
function inverseOf(x: number): number {
  let [result, base] = [1, x]
  for (let e = PRIME - 2; e > 0; e = Math.floor(e / 2)) {
    if (e % 2) result = (result * base) % PRIME
    base = (base * base) % PRIME
  }
  return result
}
