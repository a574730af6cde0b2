import type { Complex } from './complex'

/** Real polynomials are arrays of coefficients in descending powers, as in H(s) = (b₁s + b₀)/(a₁s + a₀). */
export type Polynomial = readonly number[]

const MAX_ROUNDS = 200

/** Value of a real polynomial at a complex point (Horner). */
export function evaluatePolynomial(coefficients: Polynomial, at: Complex): Complex {
  let re = 0
  let im = 0
  for (const c of coefficients) {
    const next = re * at.re - im * at.im + c
    im = re * at.im + im * at.re
    re = next
  }
  return { re, im }
}

/** Product of two polynomials. */
export function multiplyPolynomials(a: Polynomial, b: Polynomial): number[] {
  const product = new Array<number>(a.length + b.length - 1).fill(0)
  a.forEach((x, i) => b.forEach((y, j) => (product[i + j]! += x * y)))
  return product
}

/**
 * Real polynomial with the given roots and 1 in front.
 * @param roots complex ones in conjugate pairs; of a pair the one with the positive imaginary part is taken
 */
export function polynomialFromRoots(roots: readonly Complex[]): number[] {
  let product = [1]
  for (const { re, im } of roots)
    if (im === 0) product = multiplyPolynomials(product, [1, -re])
    else if (im > 0) product = multiplyPolynomials(product, [1, -2 * re, re * re + im * im])
  return product
}

/**
 * All roots of a real polynomial, each polished to the rounding of its own evaluation. Real roots are exactly real and
 * the others exact conjugate pairs. A root of multiplicity m shows as m roots about ε^(1/m) apart; these are replaced by
 * equal copies of the root of the derivative between them, which is known far better.
 *
 * @param coefficients descending powers; leading zeros are left out
 * @returns roots, by magnitude; none for a constant
 * Source: O. Aberth, Math. Comp. 27 (1973) 339; starting circles: D. A. Bini, Numer. Algorithms 13 (1996) 179.
 */
export function polynomialRoots(coefficients: Polynomial): Complex[] {
  const first = coefficients.findIndex((c) => c !== 0)
  if (first < 0) return []
  const c = coefficients.slice(first)
  const origin: Complex[] = []
  while (c.length > 1 && c[c.length - 1] === 0) {
    c.pop()
    origin.push({ re: 0, im: 0 })
  }
  const roots = startingPoints(c)
  const settled = roots.map(() => false)
  for (let round = 0; round < MAX_ROUNDS && settled.includes(false); round++)
    roots.forEach((root, i) => {
      if (settled[i]) return
      const step = aberthStep(newtonStep(c, root), roots, i)
      // At a multiple root p and p′ vanish together.
      if (!Number.isFinite(step.re + step.im)) {
        settled[i] = true
        return
      }
      root.re -= step.re
      root.im -= step.im
      settled[i] = !(Math.hypot(step.re, step.im) > 1e-15 * Math.hypot(root.re, root.im))
    })
  return [...origin, ...conjugatePairs(mergeCopies(roots, c))].sort(byMagnitude)
}

const byMagnitude = (a: Complex, b: Complex) => Math.hypot(a.re, a.im) - Math.hypot(b.re, b.im) || a.im - b.im

/** p/p′, by the reversed polynomial outside the unit circle, where powers would overflow. */
function newtonStep(c: Polynomial, z: Complex): Complex {
  const n = c.length - 1
  const outside = z.re * z.re + z.im * z.im > 1
  const at = outside ? divide({ re: 1, im: 0 }, z) : z
  let p = { re: 0, im: 0 }
  let d = { re: 0, im: 0 }
  for (let k = 0; k <= n; k++) {
    d = { re: d.re * at.re - d.im * at.im + p.re, im: d.re * at.im + d.im * at.re + p.im }
    p = { re: p.re * at.re - p.im * at.im + c[outside ? n - k : k]!, im: p.re * at.im + p.im * at.re }
  }
  if (p.re === 0 && p.im === 0) return { re: 0, im: 0 }
  if (!outside) return divide(p, d)
  const ratio = divide(d, p)
  const inner = { re: n - (ratio.re * at.re - ratio.im * at.im), im: -(ratio.re * at.im + ratio.im * at.re) }
  return divide(z, inner)
}

/** Newton's step at root i, the others divided out. */
export function aberthStep(newton: Complex, roots: readonly Complex[], i: number): Complex {
  const at = roots[i]!
  let re = 0
  let im = 0
  for (let j = 0; j < roots.length; j++) {
    if (j === i) continue
    const dr = at.re - roots[j]!.re
    const di = at.im - roots[j]!.im
    const size = dr * dr + di * di
    if (size === 0) continue
    re += dr / size
    im -= di / size
  }
  const below = { re: 1 - (newton.re * re - newton.im * im), im: -(newton.re * im + newton.im * re) }
  return below.re === 0 && below.im === 0 ? newton : divide(newton, below)
}

/** Points on circles whose radii are the slopes of the upper hull of log |c|: as many as roots have that size. */
function startingPoints(c: Polynomial): Complex[] {
  const n = c.length - 1
  const height = (power: number) => Math.log(Math.abs(c[n - power]!))
  const hull: number[] = []
  for (let k = 0; k <= n; k++) {
    if (c[n - k] === 0) continue
    while (hull.length > 1 && slope(hull[hull.length - 2]!, k) >= slope(hull[hull.length - 2]!, hull[hull.length - 1]!))
      hull.pop()
    hull.push(k)
  }
  function slope(a: number, b: number) {
    return (height(b) - height(a)) / (b - a)
  }
  const points: Complex[] = []
  for (let h = 1; h < hull.length; h++) {
    const count = hull[h]! - hull[h - 1]!
    const radius = Math.exp(-slope(hull[h - 1]!, hull[h]!))
    for (let k = 0; k < count; k++) {
      const angle = (2 * Math.PI * k) / count + 0.7 + h
      points.push({ re: radius * Math.cos(angle), im: radius * Math.sin(angle) })
    }
  }
  return points
}

/** m roots nearer to each other than rounding can hold m copies apart count as copies. */
function mergeCopies(roots: Complex[], c: Polynomial): Complex[] {
  let left = [...roots]
  const done: Complex[] = []
  for (let m = roots.length; m > 1; m--) {
    const blur = 4 * (c.length * Number.EPSILON) ** (1 / m)
    for (const root of [...left]) {
      const group = left.filter((z) => Math.hypot(z.re - root.re, z.im - root.im) < blur * Math.hypot(z.re, z.im))
      if (group.length < m) continue
      left = left.filter((z) => !group.includes(z))
      const mean = { re: 0, im: 0 }
      for (const { re, im } of group) {
        mean.re += re / group.length
        mean.im += im / group.length
      }
      const copy = rootOfDerivative(c, group.length - 1, mean)
      done.push(...group.map(() => ({ ...copy })))
    }
  }
  return [...left, ...done]
}

/** A root of multiplicity m is a simple one of the (m − 1)-th derivative, where it is known to the last digits. */
function rootOfDerivative(c: Polynomial, order: number, near: Complex): Complex {
  let derivative = [...c]
  for (let k = 0; k < order; k++) derivative = derivative.slice(0, -1).map((x, i) => x * (derivative.length - 1 - i))
  const at = { ...near }
  for (let round = 0; round < 10; round++) {
    const step = newtonStep(derivative, at)
    if (!Number.isFinite(step.re + step.im)) break
    at.re -= step.re
    at.im -= step.im
    if (Math.hypot(step.re, step.im) <= 1e-16 * Math.hypot(at.re, at.im)) break
  }
  return at
}

/** Makes roots that are real or conjugate up to rounding exactly so. */
export function conjugatePairs(roots: readonly Complex[], blur = 1e-10): Complex[] {
  const real = roots.filter((z) => Math.abs(z.im) <= blur * Math.hypot(z.re, z.im))
  const upper = roots.filter((z) => z.im > blur * Math.hypot(z.re, z.im))
  const lower = roots.filter((z) => -z.im > blur * Math.hypot(z.re, z.im))
  const paired = upper.flatMap((z) => {
    const distance = (w: Complex) => Math.hypot(w.re - z.re, w.im + z.im)
    const mate = lower.reduce((best, w, k) => (best < 0 || distance(w) < distance(lower[best]!) ? k : best), -1)
    // What has no mate is real but for rounding.
    if (mate < 0) return [{ re: z.re, im: 0 }]
    const [w] = lower.splice(mate, 1)
    const re = (z.re + w!.re) / 2
    const im = (z.im - w!.im) / 2
    return [
      { re, im },
      { re, im: -im },
    ]
  })
  return [...[...real, ...lower].map(({ re }) => ({ re, im: 0 })), ...paired]
}

export function divide(a: Complex, b: Complex): Complex {
  const size = b.re * b.re + b.im * b.im
  return { re: (a.re * b.re + a.im * b.im) / size, im: (a.im * b.re - a.re * b.im) / size }
}
