import { ProblemError } from '../problems'

/**
 * A polynomial in several variables with exact whole coefficients: coefficient by monomial. A monomial is a number that
 * holds 16 bits a variable, its exponent; variable 0 is s. No coefficient is zero; the empty map is zero.
 */
export type Polynomial = ReadonlyMap<bigint, bigint>

const BITS = 16n
const MASK = 0xffffn
/** Products of terms in one multiplication; beyond, an answer would be too long to read or to wait for. */
const PRODUCTS_MAX = 1_000_000

export const ZERO: Polynomial = new Map()
export const constant = (value: bigint): Polynomial => (value === 0n ? ZERO : new Map([[0n, value]]))
export const ONE = constant(1n)

/** The monomial of one variable to a power. */
export const powerOf = (variable: number, exponent = 1): bigint => BigInt(exponent) << (BITS * BigInt(variable))
export const variablePolynomial = (variable: number): Polynomial => new Map([[powerOf(variable), 1n]])

export const exponentIn = (monomial: bigint, variable: number): number =>
  Number((monomial >> (BITS * BigInt(variable))) & MASK)

/** Exponents from variable 0 up to the last that occurs. */
export function exponentsOf(monomial: bigint): number[] {
  const exponents: number[] = []
  for (let rest = monomial; rest > 0n; rest >>= BITS) exponents.push(Number(rest & MASK))
  return exponents
}

export const isConstant = (p: Polynomial): boolean => p.size === 0 || (p.size === 1 && p.has(0n))

/** a + factor·b. */
export function addScaled(a: Polynomial, b: Polynomial, factor = 1n): Polynomial {
  const sum = new Map(a)
  for (const [monomial, coefficient] of b) accumulate(sum, monomial, factor * coefficient)
  return sum
}

/** @throws {ProblemError} 'circuit-too-large' beyond a million products of terms */
export function multiply(a: Polynomial, b: Polynomial): Polynomial {
  if (a.size * b.size > PRODUCTS_MAX) throw tooLarge(a.size, b.size)
  const product = new Map<bigint, bigint>()
  for (const [m, c] of a) for (const [n, d] of b) accumulate(product, m + n, c * d)
  return product
}

/** coefficient·monomial·p. */
export function timesTerm(p: Polynomial, monomial: bigint, coefficient = 1n): Polynomial {
  const product = new Map<bigint, bigint>()
  for (const [m, c] of p) product.set(m + monomial, c * coefficient)
  return product
}

export function power(p: Polynomial, exponent: number): Polynomial {
  let result = ONE
  for (let k = 0; k < exponent; k++) result = multiply(result, p)
  return result
}

/** p as a polynomial in one variable: coefficients in ascending powers. */
export function coefficientsIn(p: Polynomial, variable: number): Polynomial[] {
  const coefficients: Map<bigint, bigint>[] = []
  for (const [monomial, coefficient] of p) {
    const k = exponentIn(monomial, variable)
    while (coefficients.length <= k) coefficients.push(new Map())
    coefficients[k]!.set(monomial - powerOf(variable, k), coefficient)
  }
  return coefficients
}

export function degreeIn(p: Polynomial, variable: number): number {
  let degree = 0
  for (const monomial of p.keys()) degree = Math.max(degree, exponentIn(monomial, variable))
  return degree
}

/** Variables that occur, ascending. */
export function variablesOf(p: Polynomial): number[] {
  let all = 0n
  for (const monomial of p.keys()) all |= monomial
  return exponentsOf(all).flatMap((bits, k) => (bits ? [k] : []))
}

export function derivativeIn(p: Polynomial, variable: number): Polynomial {
  const derivative = new Map<bigint, bigint>()
  for (const [monomial, coefficient] of p) {
    const k = exponentIn(monomial, variable)
    if (k > 0) derivative.set(monomial - powerOf(variable), coefficient * BigInt(k))
  }
  return derivative
}

export function equalPolynomials(a: Polynomial, b: Polynomial): boolean {
  if (a.size !== b.size) return false
  for (const [monomial, coefficient] of a) if (b.get(monomial) !== coefficient) return false
  return true
}

/** The largest monomial in lexical order, and its coefficient. */
export function leadingTerm(p: Polynomial): [monomial: bigint, coefficient: bigint] {
  let most = -1n
  for (const monomial of p.keys()) if (monomial > most) most = monomial
  return [most, p.get(most) ?? 0n]
}

const divides = (divisor: bigint, monomial: bigint): boolean => {
  for (let d = divisor, m = monomial; d > 0n; d >>= BITS, m >>= BITS) if ((d & MASK) > (m & MASK)) return false
  return true
}

/** a/b where it is a polynomial with whole coefficients, else null. b is not zero. */
export function divideExactly(a: Polynomial, b: Polynomial): Polynomial | null {
  const [lead, leadCoefficient] = leadingTerm(b)
  if (b.size === 1) return divideByTerm(a, lead, leadCoefficient)
  const rest = new Map(a)
  const quotient = new Map<bigint, bigint>()
  while (rest.size > 0) {
    const [monomial, coefficient] = leadingTerm(rest)
    if (coefficient % leadCoefficient !== 0n || !divides(lead, monomial)) return null
    const factor = coefficient / leadCoefficient
    quotient.set(monomial - lead, factor)
    if (quotient.size * b.size > PRODUCTS_MAX) throw tooLarge(quotient.size, b.size)
    for (const [m, c] of b) accumulate(rest, m + monomial - lead, -factor * c)
  }
  return quotient
}

function divideByTerm(a: Polynomial, monomial: bigint, coefficient: bigint): Polynomial | null {
  const quotient = new Map<bigint, bigint>()
  for (const [m, c] of a) {
    if (c % coefficient !== 0n || !divides(monomial, m)) return null
    quotient.set(m - monomial, c / coefficient)
  }
  return quotient
}

/** The largest monomial that divides every term. */
export function commonMonomial(p: Polynomial): bigint {
  let common: number[] | null = null
  for (const monomial of p.keys()) {
    const exponents = exponentsOf(monomial)
    common = (common ?? exponents).map((least, k) => Math.min(least, exponents[k] ?? 0))
  }
  return (common ?? []).reduce((product, exponent, k) => product + powerOf(k, exponent), 0n)
}

/** Greatest common divisor of the coefficients, positive; 0 for zero. */
export function contentOf(p: Polynomial): bigint {
  let divisor = 0n
  for (const coefficient of p.values()) {
    divisor = wholeGcd(divisor, coefficient)
    if (divisor === 1n) break
  }
  return divisor
}

/** Whole numbers, by Euclid; never negative. */
export function wholeGcd(a: bigint, b: bigint): bigint {
  let [x, y] = [a < 0n ? -a : a, b < 0n ? -b : b]
  while (y > 0n) [x, y] = [y, x % y]
  return x
}

/** Value at numbers; variable k has the value values[k]. */
export function evaluatePolynomial(p: Polynomial, values: readonly { re: number; im: number }[]) {
  const sum = { re: 0, im: 0 }
  for (const [monomial, coefficient] of p) {
    let [re, im] = [Number(coefficient), 0]
    exponentsOf(monomial).forEach((exponent, k) => {
      const x = values[k]!
      for (let j = 0; j < exponent; j++) [re, im] = [re * x.re - im * x.im, re * x.im + im * x.re]
    })
    sum.re += re
    sum.im += im
  }
  return sum
}

const tooLarge = (a: number, b: number) =>
  new ProblemError(
    'circuit-too-large',
    `Multiplying ${a} by ${b} terms is beyond what is worked out in part names; the response in numbers still is.`,
  )

function accumulate(sum: Map<bigint, bigint>, monomial: bigint, coefficient: bigint): void {
  const total = (sum.get(monomial) ?? 0n) + coefficient
  if (total === 0n) sum.delete(monomial)
  else sum.set(monomial, total)
}
