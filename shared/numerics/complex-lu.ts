/** Rounds of equilibration; each takes the square root of the imbalance that is left. */
const BALANCING_ROUNDS = 3

/**
 * A complex square matrix, its factors and its solver in one set of work arrays: nothing is allocated per matrix.
 * Fill `re` and `im` (row-major), call `factor`, then `solve` as often as needed.
 *
 * Rows and columns are scaled by powers of two first, so that a pivot is chosen among comparable numbers and scaling
 * itself rounds nothing. Rows are exchanged for the largest pivot. Zeros are skipped: circuit matrices are mostly zeros.
 *
 * Source: equilibration: D. Ruiz, RAL-TR-2001-034; elimination: G. H. Golub, C. F. Van Loan, Matrix Computations.
 */
export class ComplexLu {
  readonly re: Float64Array
  readonly im: Float64Array
  private readonly rowScale: Float64Array
  private readonly columnScale: Float64Array
  private readonly most: Float64Array
  private readonly order: Int32Array
  private readonly filled: Int32Array
  private readonly workRe: Float64Array
  private readonly workIm: Float64Array

  constructor(readonly size: number) {
    this.re = new Float64Array(size * size)
    this.im = new Float64Array(size * size)
    this.rowScale = new Float64Array(size)
    this.columnScale = new Float64Array(size)
    this.most = new Float64Array(size)
    this.order = new Int32Array(size)
    this.filled = new Int32Array(size)
    this.workRe = new Float64Array(size)
    this.workIm = new Float64Array(size)
  }

  /**
   * Replaces the matrix by its factors.
   * @param keepScaling uses the scaling of the last matrix again, when this one is alike in its sizes
   * @returns −1, or for a singular matrix the row (as filled in) that is a combination of the others
   */
  factor(keepScaling = false): number {
    if (!keepScaling) this.equilibrate()
    this.scale()
    const { size: n, re, im, order, filled } = this
    for (let k = 0; k < n; k++) order[k] = k
    for (let k = 0; k < n; k++) {
      let pivot = k
      let largest = 0
      for (let i = k; i < n; i++) {
        const at = order[i]! * n + k
        const size = re[at]! * re[at]! + im[at]! * im[at]!
        if (size > largest) {
          largest = size
          pivot = i
        }
      }
      if (!(largest > 0)) return order[k]!
      const row = order[pivot]!
      order[pivot] = order[k]!
      order[k] = row
      const base = row * n
      let count = 0
      for (let j = k + 1; j < n; j++) if (re[base + j] !== 0 || im[base + j] !== 0) filled[count++] = j
      const pr = re[base + k]! / largest
      const pi = -im[base + k]! / largest
      for (let i = k + 1; i < n; i++) {
        const other = order[i]! * n
        const ar = re[other + k]!
        const ai = im[other + k]!
        if (ar === 0 && ai === 0) continue
        const mr = ar * pr - ai * pi
        const mi = ar * pi + ai * pr
        re[other + k] = mr
        im[other + k] = mi
        for (let f = 0; f < count; f++) {
          const j = filled[f]!
          const br = re[base + j]!
          const bi = im[base + j]!
          re[other + j]! -= mr * br - mi * bi
          im[other + j]! -= mr * bi + mi * br
        }
      }
    }
    return -1
  }

  /** Solves for one right-hand side, which is replaced by the solution; shape [size]. */
  solve(bRe: Float64Array, bIm: Float64Array): void {
    const { size: n, re, im, order, workRe, workIm } = this
    for (let i = 0; i < n; i++) {
      const row = order[i]!
      let sr = bRe[row]! * this.rowScale[row]!
      let si = bIm[row]! * this.rowScale[row]!
      for (let j = 0, at = row * n; j < i; j++, at++) {
        const ar = re[at]!
        const ai = im[at]!
        if (ar === 0 && ai === 0) continue
        sr -= ar * workRe[j]! - ai * workIm[j]!
        si -= ar * workIm[j]! + ai * workRe[j]!
      }
      workRe[i] = sr
      workIm[i] = si
    }
    for (let i = n - 1; i >= 0; i--) {
      const base = order[i]! * n
      let sr = workRe[i]!
      let si = workIm[i]!
      for (let j = i + 1; j < n; j++) {
        const ar = re[base + j]!
        const ai = im[base + j]!
        if (ar === 0 && ai === 0) continue
        sr -= ar * workRe[j]! - ai * workIm[j]!
        si -= ar * workIm[j]! + ai * workRe[j]!
      }
      const dr = re[base + i]!
      const di = im[base + i]!
      const size = dr * dr + di * di
      workRe[i] = (sr * dr + si * di) / size
      workIm[i] = (si * dr - sr * di) / size
    }
    for (let i = 0; i < n; i++) {
      bRe[i] = workRe[i]! * this.columnScale[i]!
      bIm[i] = workIm[i]! * this.columnScale[i]!
    }
  }

  private equilibrate(): void {
    const { size: n, re, im, rowScale, columnScale, most } = this
    rowScale.fill(1)
    columnScale.fill(1)
    for (let round = 0; round < BALANCING_ROUNDS; round++) {
      most.fill(0)
      for (let i = 0, at = 0; i < n; i++) {
        let largest = 0
        for (let j = 0; j < n; j++, at++) {
          const size = Math.max(Math.abs(re[at]!), Math.abs(im[at]!))
          if (size === 0) continue
          const scaled = size * rowScale[i]! * columnScale[j]!
          if (scaled > largest) largest = scaled
          if (scaled > most[j]!) most[j] = scaled
        }
        if (largest > 0) rowScale[i]! /= Math.sqrt(largest)
      }
      for (let j = 0; j < n; j++) if (most[j]! > 0) columnScale[j]! /= Math.sqrt(most[j]!)
    }
    for (let i = 0; i < n; i++) {
      rowScale[i] = powerOfTwo(rowScale[i]!)
      columnScale[i] = powerOfTwo(columnScale[i]!)
    }
  }

  private scale(): void {
    const { size: n, re, im, rowScale, columnScale } = this
    for (let i = 0, at = 0; i < n; i++)
      for (let j = 0; j < n; j++, at++) {
        if (re[at] === 0 && im[at] === 0) continue
        const scale = rowScale[i]! * columnScale[j]!
        re[at]! *= scale
        im[at]! *= scale
      }
  }
}

const powerOfTwo = (scale: number) => 2 ** Math.round(Math.log2(scale))
