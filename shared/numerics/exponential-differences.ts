import type { Complex } from './complex'

/** Terms of the series, of norm ½ at most: the rest is below 1e-21. */
const TERMS = 16

/**
 * Divided differences of e^{x} over x_k … x_m for k = 1 … m, with x = p·t: for equal points e^{x}/(m − k)!. They are the
 * last column of the exponential of the bidiagonal matrix of the points, by scaling and squaring, which stays exact
 * where points nearly coincide and the quotients of the definition cancel.
 *
 * @param points p, 1/s, at least one
 * @param timeSec t, s
 * @returns shape [m], the last being e^{x_m}
 * Source: A. McCurdy, K. C. Ng, B. N. Parlett, Math. Comp. 43 (1984) 501.
 */
export function exponentialDifferences(points: readonly Complex[], timeSec: number): Complex[] {
  const m = points.length
  if (m === 1) return [exponential(points[0]!.re * timeSec, points[0]!.im * timeSec)]
  const centre = { re: 0, im: 0 }
  for (const { re, im } of points) {
    centre.re += re / m
    centre.im += im / m
  }
  const outer = exponential(centre.re * timeSec, centre.im * timeSec)
  if (outer.re === 0 && outer.im === 0) return points.map(() => ({ re: 0, im: 0 }))
  const offsets = points.map(({ re, im }) => ({ re: (re - centre.re) * timeSec, im: (im - centre.im) * timeSec }))
  const norm = 1 + Math.max(...offsets.map(({ re, im }) => Math.hypot(re, im)))
  const halvings = Math.max(0, Math.ceil(Math.log2(2 * norm)))
  let matrix = series(offsets, 2 ** -halvings)
  for (let k = 0; k < halvings; k++) matrix = product(matrix, matrix, m)
  return points.map((_, k) => {
    const at = k * m + m - 1
    const [re, im] = [matrix.re[at]!, matrix.im[at]!]
    return { re: outer.re * re - outer.im * im, im: outer.re * im + outer.im * re }
  })
}

interface Square {
  re: Float64Array
  im: Float64Array
}

/** The exponential of the bidiagonal matrix (offsets on the diagonal, 1 above it) times a small factor, by its series. */
function series(offsets: readonly Complex[], factor: number): Square {
  const m = offsets.length
  const step: Square = { re: new Float64Array(m * m), im: new Float64Array(m * m) }
  const sum: Square = { re: new Float64Array(m * m), im: new Float64Array(m * m) }
  offsets.forEach(({ re, im }, k) => {
    step.re[k * m + k] = re * factor
    step.im[k * m + k] = im * factor
    if (k + 1 < m) step.re[k * m + k + 1] = factor
    sum.re[k * m + k] = 1
  })
  let term = sum
  const total = { re: Float64Array.from(sum.re), im: Float64Array.from(sum.im) }
  for (let order = 1; order <= TERMS; order++) {
    term = product(term, step, m)
    for (let k = 0; k < m * m; k++) {
      term.re[k]! /= order
      term.im[k]! /= order
      total.re[k]! += term.re[k]!
      total.im[k]! += term.im[k]!
    }
  }
  return total
}

/** Product of two upper triangular matrices. */
function product(a: Square, b: Square, m: number): Square {
  const found: Square = { re: new Float64Array(m * m), im: new Float64Array(m * m) }
  for (let i = 0; i < m; i++)
    for (let j = i; j < m; j++)
      for (let k = i; k <= j; k++) {
        const [p, q] = [i * m + k, k * m + j]
        found.re[i * m + j]! += a.re[p]! * b.re[q]! - a.im[p]! * b.im[q]!
        found.im[i * m + j]! += a.re[p]! * b.im[q]! + a.im[p]! * b.re[q]!
      }
  return found
}

const exponential = (re: number, im: number): Complex => {
  const size = Math.exp(re)
  return { re: size * Math.cos(im), im: size * Math.sin(im) }
}
