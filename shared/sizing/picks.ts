import type { SizingProblem } from './recipe'

/** How many sets of free picks are followed at most; the nearest to their start come first. */
export const PICKS_MOST = 2400
/** How many are followed where all stock combinations are looked through afterwards. */
export const PICKS_FIRST = 240
/** Values of one free pick that are followed when another is free too; a fine series has no need of all of them. */
const VALUES_MOST = 60
const FINE_VALUES_MOST = 24
/** Combinations of free picks that are put in order at most; many picks share them. */
const COMBINATIONS_MOST = 3600

/** How far a value lies from its start, as a natural logarithm; 0 when the start is unknown. */
export const distance = (value: number, start: number) => (start > 0 ? Math.abs(Math.log(value / start)) : 0)

/** All combinations of stock values for the free picks, nearest to their start first. */
export function picksInOrder(problem: SizingProblem, starts: readonly number[]): { picks: number[]; far: number }[] {
  const combinations = problem.free.reduce<number[][]>(
    (all, pick, k) =>
      all.flatMap((picks) => candidates(pick.stock, starts[k]!, problem.free.length).map((value) => [...picks, value])),
    [[]],
  )
  const far = (picks: number[]) => picks.reduce((sum, value, k) => sum + distance(value, starts[k]!), 0)
  return combinations.map((picks) => ({ picks, far: far(picks) })).sort((a, b) => a.far - b.far)
}

/** Stock values of a free pick: all when it is alone, else the nearest to its start, few of a resistor's fine series. */
function candidates(stock: number[], start: number, picks: number): number[] {
  if (picks === 1 || !(start > 0)) return stock
  const perDecade = stock.length / Math.max(1, Math.log10(stock.at(-1)! / stock[0]!))
  const share = Math.max(1, Math.floor(COMBINATIONS_MOST ** (1 / picks) + 1e-9))
  const most = Math.min(share, perDecade > 30 ? FINE_VALUES_MOST : VALUES_MOST)
  return [...stock].sort((a, b) => distance(a, start) - distance(b, start)).slice(0, most)
}
