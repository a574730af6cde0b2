import type { Complex, ComplexArray } from '../numerics/complex'
import { complexArray } from '../numerics/complex'
import { ComplexLu } from '../numerics/complex-lu'

/** A sparse matrix G + sC with real G and C, one triplet an entry; each place occurs once. */
export interface Pencil {
  size: number
  row: number[]
  column: number[]
  g: number[]
  c: number[]
}

/** Within this ratio of |s| the matrix is scaled as before. */
const SAME_SCALING = 3

/**
 * Solves (G + sC)x = b for one pencil at any number of complex frequencies, in the same work arrays.
 * Source of the trace identity: Jacobi's formula, d ln det A/ds = tr(A⁻¹ dA/ds).
 */
export class PencilSolver {
  private readonly lu: ComplexLu
  private readonly x: ComplexArray
  private readonly rest: ComplexArray
  private readonly reactive: { row: number; entries: number[] }[] = []
  private sRe = 0
  private sIm = 0
  private scaledAt = NaN

  constructor(readonly pencil: Pencil) {
    this.lu = new ComplexLu(pencil.size)
    this.x = complexArray(pencil.size)
    this.rest = complexArray(pencil.size)
    const rows = new Map<number, number[]>()
    pencil.c.forEach((c, k) => {
      if (c !== 0) rows.set(pencil.row[k]!, [...(rows.get(pencil.row[k]!) ?? []), k])
    })
    rows.forEach((entries, row) => this.reactive.push({ row, entries }))
  }

  /** Factors the matrix at s, rad/s. @returns false when it is singular there */
  at(sRe: number, sIm: number): boolean {
    const { size: order, row, column, g, c } = this.pencil
    const { re, im } = this.lu
    re.fill(0)
    im.fill(0)
    this.sRe = sRe
    this.sIm = sIm
    for (let k = 0; k < row.length; k++) {
      const place = row[k]! * order + column[k]!
      re[place] = g[k]! + sRe * c[k]!
      im[place] = sIm * c[k]!
    }
    const size = Math.hypot(sRe, sIm)
    const keep = size > this.scaledAt / SAME_SCALING && size < this.scaledAt * SAME_SCALING
    if (!keep) this.scaledAt = size
    return this.lu.factor(keep) < 0
  }

  /**
   * Solution for a real right-hand side, with one round of refinement, which makes the error as small as if each
   * matrix entry had been rounded once (R. D. Skeel, Math. Comp. 35 (1980) 817).
   * @returns a view of the work array: valid until the next call
   */
  solve(b: ArrayLike<number>): ComplexArray {
    const { x, rest, sRe, sIm } = this
    const { size, row, column, g, c } = this.pencil
    for (let i = 0; i < size; i++) {
      x.re[i] = rest.re[i] = b[i]!
      x.im[i] = rest.im[i] = 0
    }
    this.lu.solve(x.re, x.im)
    for (let k = 0; k < row.length; k++) {
      const j = column[k]!
      const ar = g[k]! + sRe * c[k]!
      const ai = sIm * c[k]!
      rest.re[row[k]!]! -= ar * x.re[j]! - ai * x.im[j]!
      rest.im[row[k]!]! -= ar * x.im[j]! + ai * x.re[j]!
    }
    this.lu.solve(rest.re, rest.im)
    for (let i = 0; i < size; i++) {
      x.re[i]! += rest.re[i]!
      x.im[i]! += rest.im[i]!
    }
    return x
  }

  /** d ln det/ds at the s last factored, s/rad. */
  logDerivative(): Complex {
    const { rest } = this
    let re = 0
    let im = 0
    for (const { row, entries } of this.reactive) {
      rest.re.fill(0)
      rest.im.fill(0)
      rest.re[row] = 1
      this.lu.solve(rest.re, rest.im)
      for (const k of entries) {
        re += this.pencil.c[k]! * rest.re[this.pencil.column[k]!]!
        im += this.pencil.c[k]! * rest.im[this.pencil.column[k]!]!
      }
    }
    return { re, im }
  }
}
