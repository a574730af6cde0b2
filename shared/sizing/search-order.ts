import type { Trend } from './trend'

const EXHAUSTIVE_MOST = 6

export interface OrderQuestion {
  /** Stock values of each part. */
  counts: number[]
  /** By target, by part: null where the target does not depend on the part. */
  trends: (Trend | null)[][]
  /** By target, by part: natural logarithm of how far the part moves the target. */
  spans: number[][]
  /** Relative half-width of the window that a target must fall in. */
  bound: number
}

/**
 * The order in which to choose parts so that targets rule out most sets early: the one with the fewest expected choices,
 * targets being taken as spread evenly in their logarithm.
 *
 * @returns places of the parts; as they stand when there are too many to try every order
 */
export function searchOrder(question: OrderQuestion): number[] {
  const all = question.counts.map((_, part) => part)
  let best = { cost: expectedCost(question, all), order: all }
  if (all.length > EXHAUSTIVE_MOST) return all
  for (const order of permutations(all)) {
    const cost = expectedCost(question, order)
    if (cost < best.cost) best = { cost, order }
  }
  return best.order
}

function expectedCost({ counts, trends, spans, bound }: OrderQuestion, order: number[]): number {
  let cost = 0
  let sets = 1
  for (let depth = 0; depth < order.length; depth++) {
    // Each choice so far costs one look at the window of the next part, two while other parts are open.
    if (depth > 0) cost += sets * (depth === order.length - 1 ? 1 : 2)
    const left = order.slice(depth + 1)
    sets = order.slice(0, depth + 1).reduce((product, part) => product * counts[part]!, 1)
    trends.forEach((trend, target) => {
      const whole = spans[target]!.reduce((sum, span) => sum + span, 0)
      if (left.some((part) => trend[part]?.sign === 0) || !(whole > 0)) return
      const open = left.reduce((sum, part) => sum + spans[target]![part]!, 0)
      sets *= Math.min(1, (open + 2 * bound) / whole)
    })
  }
  return cost + sets
}

function* permutations(items: number[]): Generator<number[]> {
  if (items.length <= 1) {
    yield items
    return
  }
  for (const item of items) for (const rest of permutations(items.filter((one) => one !== item))) yield [item, ...rest]
}
