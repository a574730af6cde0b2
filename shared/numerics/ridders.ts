/** Quotient between one step and the next. */
export const RIDDERS_RATIO = 2

/**
 * Limit of central differences for a step that goes to 0, by extrapolation; of all orders and steps that entry is taken
 * which changes least from its neighbours, so that neither a large step's curvature nor a small step's rounding stays.
 * @param differences (f(x + h) − f(x − h))/2h for steps that fall by RIDDERS_RATIO; such as are not finite are left out
 * @returns the derivative; NaN when no difference is finite
 * Source: C. J. F. Ridders, Adv. Eng. Softw. 4 (1982) 75.
 */
export function riddersLimit(differences: readonly number[]): number {
  const start = differences.findLastIndex((one) => !Number.isFinite(one)) + 1
  let above: number[] = []
  let best = NaN
  let leastChange = Infinity
  for (const difference of differences.slice(start)) {
    const row = [difference]
    let factor = RIDDERS_RATIO ** 2
    for (const [k, before] of above.entries()) {
      const value = row[k]! + (row[k]! - before) / (factor - 1)
      const change = Math.max(Math.abs(value - row[k]!), Math.abs(value - before))
      if (change < leastChange) {
        leastChange = change
        best = value
      }
      row.push(value)
      factor *= RIDDERS_RATIO ** 2
    }
    if (Number.isNaN(best)) best = difference
    above = row
  }
  return best
}
