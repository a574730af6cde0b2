import { seededRandom } from '../numerics/random'
import type { SearchPart } from './recipe'

/** How a target moves with one part while the others rest. */
export interface Trend {
  /** +1 rises, −1 falls, 0 neither everywhere. */
  sign: -1 | 0 | 1
  /** Exponent where the target is a power of the part, else null. */
  exponent: number | null
}

const RANDOM_POINTS = 24
const SEED = 1952
const SAME = 1e-9

/**
 * Finds the trend of a target along one part over its stock, by trying it at the ends of the other parts' ranges, at
 * seeded points between and around a set that is known.
 *
 * @param formula the target, positive at every set that counts
 * @param parts all parts that move; `part` is one of them
 * @param env vector; left as it was
 */
export function trendOf(
  formula: (env: Float64Array) => number,
  part: SearchPart,
  parts: readonly SearchPart[],
  env: Float64Array,
): Trend {
  const random = seededRandom(SEED)
  const kept = parts.map((one) => env[one.slot]!)
  const others = parts.filter((one) => one !== part)
  const along = [0, 0.13, 0.31, 0.5, 0.69, 0.87, 1].map(
    (share) => part.stock[Math.round(share * (part.stock.length - 1))]!,
  )
  const corners = Math.min(2 ** others.length, 32)
  let rises = true
  let falls = true
  let exponent: number | null | undefined
  for (let point = -1; point < corners + RANDOM_POINTS; point++) {
    if (point >= 0)
      others.forEach(({ slot, stock }, k) => {
        const share = point < corners ? (point >> k) & 1 : random()
        env[slot] = stock[Math.round(share * (stock.length - 1))]!
      })
    const logs = along.map((value) => {
      env[part.slot] = value
      return Math.log(formula(env))
    })
    for (let k = 1; k < along.length; k++) {
      const run = Math.log(along[k]! / along[k - 1]!)
      if (!(run > 0)) continue
      const slope = (logs[k]! - logs[k - 1]!) / run
      if (!(slope >= -SAME)) rises = false
      if (!(slope <= SAME)) falls = false
      exponent = exponent === undefined || (exponent !== null && Math.abs(slope - exponent) < SAME) ? slope : null
    }
  }
  parts.forEach((one, k) => (env[one.slot] = kept[k]!))
  return { sign: rises ? 1 : falls ? -1 : 0, exponent: exponent ? exponent : null }
}
