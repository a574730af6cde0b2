import { describe, expect, it } from 'vitest'
import { bracketedMinimum, bracketedRoot } from '#shared/numerics/brent'
import { ComplexLu } from '#shared/numerics/complex-lu'
import {
  evaluatePolynomial,
  multiplyPolynomials,
  polynomialFromRoots,
  polynomialRoots,
} from '#shared/numerics/polynomial'
import { seededRandom, xoshiro128 } from '#shared/numerics/random'
import { FIELDS, commonDegree, eliminate, interpolate, invert, multiply, residue } from '#shared/numerics/residues'
import { setDistance } from '../../support/circuits'

describe('seeded random numbers', () => {
  it('follow xoshiro128** from the state 1, 2, 3, 4', () => {
    // Source: output of the authors' xoshiro128starstar.c, version 1.1 (prng.di.unimi.it).
    const next = xoshiro128(Uint32Array.of(1, 2, 3, 4))
    expect(Array.from({ length: 10 }, next)).toEqual([
      11520, 0, 5927040, 70819200, 2031721883, 1637235492, 1287239034, 3734860849, 3729100597, 4258142804,
    ])
  })

  it('repeat for the same seed and differ for the next one', () => {
    const draw = (seed: number) => Array.from({ length: 5 }, seededRandom(seed))
    expect(draw(7)).toEqual(draw(7))
    expect(draw(7)).not.toEqual(draw(8))
  })

  it('are uniform on [0, 1)', () => {
    const random = seededRandom(1)
    const draws = Array.from({ length: 100_000 }, random)
    expect(Math.min(...draws.slice(0, 50_000))).toBeGreaterThanOrEqual(0)
    expect(Math.max(...draws.slice(0, 50_000))).toBeLessThan(1)
    // Mean ½ and variance 1/12, four standard errors of 100,000 draws.
    const mean = draws.reduce((sum, x) => sum + x, 0) / draws.length
    const variance = draws.reduce((sum, x) => sum + (x - mean) ** 2, 0) / draws.length
    expect(mean).toAgreeWith(0.5, { absolute: 4 / Math.sqrt(12 * draws.length) })
    expect(variance).toAgreeWith(1 / 12, { absolute: 4 / Math.sqrt(180 * draws.length) })
  })
})

describe('bracketed root and minimum', () => {
  // Closed forms: the Dottie number to 16 places is a classical constant; the others are exact.
  it.each([
    [(x: number) => Math.cos(x) - x, 0, 1, 0.7390851332151607],
    [(x: number) => x ** 3 - 2, 0, 2, Math.cbrt(2)],
    [(x: number) => (x - 1) ** 9, 0, 3, 1],
    [(x: number) => Math.atan(1e6 * (x - 0.25)), -10, 10, 0.25],
  ])('finds a root to the last digits (%#)', (of, from, to, wanted) => {
    expect(bracketedRoot(of, from, to)).toAgreeWith(wanted, { absolute: 1e-14 * Math.abs(wanted) + 1e-15 })
  })

  it('takes a root at an end and refuses a bracket without a change of sign', () => {
    expect(bracketedRoot((x) => x, 0, 1)).toBe(0)
    expect(bracketedRoot((x) => x * x + 1, -1, 1)).toBeNaN()
  })

  it('finds a minimum as well as its flatness allows', () => {
    const { at, value } = bracketedMinimum((x) => (x - 2) ** 2 + 3, -10, 10)
    expect(at).toAgreeWith(2, { relative: 1e-7 })
    expect(value).toAgreeWith(3, { relative: 1e-14 })
  })
})

describe('complex LU', () => {
  const filled = (re: number[], im = re.map(() => 0)) => {
    const lu = new ComplexLu(Math.sqrt(re.length))
    lu.re.set(re)
    lu.im.set(im)
    return lu
  }

  it('solves a system whose entries differ by 24 decades', () => {
    // 2⁴⁰x + y and x + 2⁻³⁹y at x = 1, y = 2⁴⁰.
    const lu = filled([2 ** 40, 1, 1, 2 ** -39])
    expect(lu.factor()).toBe(-1)
    const b = { re: Float64Array.of(2 ** 41, 3), im: new Float64Array(2) }
    lu.solve(b.re, b.im)
    expect(b.re).toAgreeWith([1, 2 ** 40], { relative: 1e-15 })
  })

  it('solves random complex systems', () => {
    const random = seededRandom(5)
    const n = 12
    const re = Array.from({ length: n * n }, () => random() - 0.5)
    const im = Array.from({ length: n * n }, () => random() - 0.5)
    const lu = filled(re, im)
    expect(lu.factor()).toBe(-1)
    const x = Array.from({ length: n }, (_, k) => ({ re: k + 1, im: -k }))
    const bRe = Float64Array.from(x, (_, i) =>
      x.reduce((sum, z, j) => sum + re[i * n + j]! * z.re - im[i * n + j]! * z.im, 0),
    )
    const bIm = Float64Array.from(x, (_, i) =>
      x.reduce((sum, z, j) => sum + re[i * n + j]! * z.im + im[i * n + j]! * z.re, 0),
    )
    lu.solve(bRe, bIm)
    expect(bRe).toAgreeWith(
      x.map((z) => z.re),
      { relative: 1e-12 },
    )
    expect(bIm).toAgreeWith(
      x.map((z) => z.im),
      { relative: 1e-12, absolute: 1e-12 },
    )
  })

  it('reports the row that hangs on the others', () => {
    expect(filled([1, 2, 3, 0, 1, 4, 0, 0, 0]).factor()).toBe(2)
    expect(filled([1, 0, 0, 1, 0, 0, 0, 0, 1]).factor()).toBeGreaterThanOrEqual(0)
  })
})

describe('polynomials', () => {
  it('multiplies and evaluates', () => {
    expect(multiplyPolynomials([1, 2], [1, -2])).toEqual([1, 0, -4])
    expect(evaluatePolynomial([1, 0, 1], { re: 0, im: 1 })).toEqual({ re: 0, im: 0 })
    expect(evaluatePolynomial([2, 3, 4], { re: 1, im: 2 })).toEqual({ re: 1, im: 14 })
  })

  it.each([
    ['real roots twelve decades apart', [-1e-6, -1, -1e6].map((re) => ({ re, im: 0 }))],
    [
      'pairs of high Q',
      [
        { re: -0.001, im: 1 },
        { re: -0.001, im: -1 },
        { re: -5, im: 0 },
      ],
    ],
    [
      'roots at 0',
      [
        { re: 0, im: 0 },
        { re: 0, im: 0 },
        { re: -3e5, im: 0 },
      ],
    ],
    ['a single root', [{ re: 4, im: 0 }]],
  ])('finds %s', (_, roots) => {
    expect(setDistance(polynomialRoots(polynomialFromRoots(roots)), roots)).toBeLessThan(1e-11)
  })

  it.each([
    ['(s + 1)²', [1, 2, 1], [-1, -1].map((re) => ({ re, im: 0 }))],
    ['(s + 2)³', [1, 6, 12, 8], [-2, -2, -2].map((re) => ({ re, im: 0 }))],
    ['(s + 2)⁴', [1, 8, 24, 32, 16], [-2, -2, -2, -2].map((re) => ({ re, im: 0 }))],
    ['(s² + 2s + 2)²', [1, 4, 8, 8, 4], [1, -1, 1, -1].map((im) => ({ re: -1, im }))],
    ['(s + 1)²(s + 10)', [1, 12, 21, 10], [-1, -1, -10].map((re) => ({ re, im: 0 }))],
  ])('gives copies of the multiple root of %s as equal numbers', (_, coefficients, roots) => {
    const found = polynomialRoots(coefficients)
    expect(setDistance(found, roots)).toBeLessThan(1e-14)
    expect(new Set(found.map(({ re, im }) => `${re} ${im}`)).size).toBe(
      new Set(roots.map((z) => `${z.re} ${z.im}`)).size,
    )
  })

  it('gives none for a constant and leaves leading zeros out', () => {
    expect(polynomialRoots([3])).toEqual([])
    expect(polynomialRoots([0, 0, 1, 2])).toEqual([{ re: -2, im: 0 }])
  })
})

describe.each(FIELDS)('whole numbers modulo $prime', (field) => {
  it('has a prime modulus', () => {
    for (let d = 2; d * d <= field.prime; d++) expect(field.prime % d === 0, `divisor ${d}`).toBe(false)
  })

  it('takes a double as the decimal number it is written as', () => {
    // 2.2e-9 · 10 is not 2.2e-8 as doubles; as decimals it is.
    expect(multiply(residue(2.2e-9, field), 10, field)).toBe(residue(2.2e-8, field))
    expect(multiply(residue(0.1, field), residue(10, field), field)).toBe(1)
    expect(residue(-3, field)).toBe(field.prime - 3)
    expect(residue(1.5e12, field)).toBe(multiply(residue(1.5e6, field), 1e6, field))
    expect(multiply(invert(12345, field), 12345, field)).toBe(1)
  })

  it('finds determinants, the dependent column, interpolation and common factors exactly', () => {
    expect(eliminate(Float64Array.of(0, 2, 3, 4), 2, field)).toEqual({ determinant: field.prime - 6, column: -1 })
    expect(eliminate(Float64Array.of(1, 2, 2, 4), 2, field)).toEqual({ determinant: 0, column: 1 })
    // 3 + 2s + s² at 1, 2, 3.
    expect(interpolate([6, 11, 18], field)).toEqual([3, 2, 1])
    // (s + 1)(s + 2) and (s + 1)(s + 3); s + 1 and s + 2.
    expect(commonDegree([2, 3, 1], [3, 4, 1], field)).toBe(1)
    expect(commonDegree([1, 1], [2, 1], field)).toBe(0)
  })
})
