const STEP = 1e-6
const ITERATIONS = 25

/**
 * Moves the unknowns until every target is met, by Gauss–Newton on logarithms with the least-norm step, so that
 * values held against the recipe still lead to sets that meet the targets.
 *
 * @param env vector of parts and results; the unknown slots are changed in place
 * @param unknowns slots of the parts that may move, all > 0
 * @param targets formula and wanted value of each target
 * @returns true when every target is met to 1e-9 relative
 * Source: Å. Björck, Numerical Methods for Least Squares Problems, 1996, chapter 9 (from memory).
 */
export function meetTargets(
  env: Float64Array,
  unknowns: number[],
  targets: { formula: (env: Float64Array) => number; value: number }[],
): boolean {
  const m = targets.length
  const n = unknowns.length
  const residual = () => targets.map((one) => Math.log(one.formula(env) / one.value))
  const size = (r: number[]) => Math.max(...r.map(Math.abs))
  let r = residual()
  if (r.some((x) => !Number.isFinite(x))) return false
  for (let round = 0; round < ITERATIONS && size(r) > 1e-10; round++) {
    const jacobian = unknowns.map((slot) => {
      const kept = env[slot]!
      env[slot] = kept * Math.exp(STEP)
      const moved = residual()
      env[slot] = kept
      return moved.map((x, i) => (x - r[i]!) / STEP)
    })
    const step = leastNormStep(jacobian, r, m, n)
    if (!step) return false
    const kept = unknowns.map((slot) => env[slot]!)
    let damping = 1
    for (; damping > 1e-3; damping /= 2) {
      unknowns.forEach((slot, k) => (env[slot] = kept[k]! * Math.exp(clamp(damping * step[k]!, 5))))
      const next = residual()
      if (next.every(Number.isFinite) && size(next) < size(r)) {
        r = next
        break
      }
    }
    if (damping <= 1e-3) {
      unknowns.forEach((slot, k) => (env[slot] = kept[k]!))
      return size(r) < 1e-9
    }
  }
  return size(r) < 1e-9
}

const clamp = (x: number, most: number) => Math.max(-most, Math.min(most, x))

/** Least-norm solution of Jᵀ… : step = −Jᵀ (J Jᵀ + λI)⁻¹ r, with J[i][k] = jacobian[k][i]. */
function leastNormStep(jacobian: number[][], r: number[], m: number, n: number): number[] | null {
  const a = r.map((_, i) => r.map((_, j) => jacobian.reduce((sum, column) => sum + column[i]! * column[j]!, 0)))
  const trace = a.reduce((sum, row, i) => sum + row[i]!, 0)
  if (!(trace > 0)) return null
  a.forEach((row, i) => (row[i]! += 1e-12 * trace))
  const y = solveSmall(a, r)
  if (!y) return null
  return Array.from(
    { length: n },
    (_, k) => -Array.from({ length: m }, (_, i) => jacobian[k]![i]! * y[i]!).reduce((s, x) => s + x, 0),
  )
}

/** Gaussian elimination with partial pivoting for the few targets of a recipe. */
function solveSmall(matrix: number[][], right: number[]): number[] | null {
  const rows = matrix.map((row, i) => [...row, right[i]!])
  const n = rows.length
  for (let c = 0; c < n; c++) {
    const pivot = rows
      .slice(c)
      .reduce((best, row, i) => (Math.abs(row[c]!) > Math.abs(rows[best]![c]!) ? c + i : best), c)
    ;[rows[c], rows[pivot]] = [rows[pivot]!, rows[c]!]
    const head = rows[c]!
    if (!(Math.abs(head[c]!) > 0)) return null
    for (let i = c + 1; i < n; i++) {
      const row = rows[i]!
      const factor = row[c]! / head[c]!
      for (let j = c; j <= n; j++) row[j]! -= factor * head[j]!
    }
  }
  const x = new Array<number>(n).fill(0)
  for (let i = n - 1; i >= 0; i--) {
    const row = rows[i]!
    x[i] = (row[n]! - row.slice(i + 1, n).reduce((sum, a, k) => sum + a * x[i + 1 + k]!, 0)) / row[i]!
  }
  return x
}
