import { describe, expect, it } from 'vitest'
import { seededRandom } from '#shared/numerics/random'
import { greatestCommonDivisor, primitive } from '#shared/symbolic/common-factor'
import { factored } from '#shared/symbolic/factors'
import type { Polynomial } from '#shared/symbolic/polynomial'
import {
  ONE,
  addScaled,
  constant,
  divideExactly,
  equalPolynomials,
  evaluatePolynomial,
  multiply,
  power,
  timesTerm,
  variablePolynomial,
} from '#shared/symbolic/polynomial'

const [s, x, y, z] = [0, 1, 2, 3].map(variablePolynomial) as [Polynomial, Polynomial, Polynomial, Polynomial]
const sum = (...list: Polynomial[]) => list.reduce((a, b) => addScaled(a, b))
const product = (...list: Polynomial[]) => list.reduce(multiply)

const randomPolynomial = (random: () => number): Polynomial => {
  let p: Polynomial = new Map()
  for (let k = 0; k < 2 + random() * 3; k++) {
    let term = constant(BigInt(Math.floor(random() * 9) - 4))
    for (const v of [s, x, y, z]) if (random() < 0.4) term = multiply(term, random() < 0.2 ? power(v, 2) : v)
    p = sum(p, term)
  }
  return p.size ? p : ONE
}

describe('polynomials', () => {
  it('multiply and divide back exactly', () => {
    const random = seededRandom(3)
    for (let k = 0; k < 300; k++) {
      const [a, b] = [randomPolynomial(random), randomPolynomial(random)]
      expect(equalPolynomials(divideExactly(multiply(a, b), b)!, a)).toBe(true)
    }
  })

  it('say when a division leaves a rest', () => {
    expect(divideExactly(sum(x, ONE), y)).toBeNull()
    expect(divideExactly(sum(product(x, x), y), sum(x, ONE))).toBeNull()
    expect(divideExactly(x, constant(2n))).toBeNull()
  })

  it('take values', () => {
    const at = [
      { re: 0, im: 2 },
      { re: 3, im: 0 },
    ]
    expect(evaluatePolynomial(sum(product(s, s, x), ONE), at)).toEqual({ re: -11, im: 0 })
  })
})

describe('greatest common divisor', () => {
  // (g·a, g·b) with a, b coprime by construction: b = a + 1 shares nothing with a.
  it('finds the factor that two products were given', () => {
    const random = seededRandom(4)
    for (let k = 0; k < 300; k++) {
      const [g, a] = [randomPolynomial(random), randomPolynomial(random)]
      const b = sum(a, ONE)
      if (b.size === 0) continue
      const found = greatestCommonDivisor(multiply(g, a), multiply(g, b))
      expect(equalPolynomials(primitive(found), primitive(g))).toBe(true)
    }
  })

  it('keeps powers, monomials and whole numbers', () => {
    const a = timesTerm(product(power(sum(x, y), 2), z, z), 0n, 6n)
    const b = timesTerm(product(power(sum(x, y), 3), z), 0n, 4n)
    expect(equalPolynomials(greatestCommonDivisor(a, b), timesTerm(product(power(sum(x, y), 2), z), 0n, 2n))).toBe(true)
  })

  it('is 1 for polynomials with nothing in common', () => {
    expect(greatestCommonDivisor(sum(x, y), sum(x, z))).toEqual(ONE)
  })
})

describe('factors', () => {
  it.each([
    [[sum(x, y), sum(ONE, product(s, z))]],
    [[sum(x, y), sum(x, y), sum(y, z)]],
    [[sum(ONE, product(s, x)), sum(ONE, product(s, y)), sum(ONE, product(s, z))]],
  ])('are found again in their product', (list) => {
    const { whole, monomial, factors } = factored(timesTerm(product(...list, y), 0n, -3n))
    expect([whole, factors.length]).toEqual([-3n, list.length])
    expect(equalPolynomials(new Map([[monomial, 1n]]), y)).toBe(true)
    expect(equalPolynomials(factors.reduce(multiply), product(...list))).toBe(true)
  })
})
