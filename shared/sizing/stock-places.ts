/** Place of the first stock value that is at least x (1e-12 slack); the length when there is none. */
export function firstAtLeast(stock: readonly number[], x: number): number {
  let low = 0
  let high = stock.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (stock[middle]! < x * (1 - 1e-12)) low = middle + 1
    else high = middle
  }
  return low
}

/** Up to `each` stock values below x and up to `each` at or above it. */
export function bothSides(stock: readonly number[], x: number, each: number): number[] {
  const at = firstAtLeast(stock, x)
  return stock.slice(Math.max(0, Math.min(at, stock.length) - each), at + each)
}

/** Up to `count` stock values on one side of x, the nearest first; x itself counts when it is in stock. */
export function oneSided(stock: readonly number[], x: number, count: number, round: 'up' | 'down'): number[] {
  const at = firstAtLeast(stock, x)
  if (round === 'up') return stock.slice(at, at + count)
  const end = stock[at] !== undefined && stock[at]! <= x * (1 + 1e-12) ? at + 1 : at
  return stock.slice(Math.max(0, end - count), end).reverse()
}
