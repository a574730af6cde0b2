/**
 * Puts the k-th smallest of a stretch in its place, smaller ones before it and greater ones after.
 * @param values no NaN; reordered in place
 * @param k place from 0, within from … to
 * @returns the value at k
 * Source: C. A. R. Hoare, Commun. ACM 4 (1961) 321 (FIND), median of three as pivot.
 */
export function selectInPlace(values: Float64Array, k: number, from = 0, to = values.length - 1): number {
  let [left, right] = [from, to]
  while (left < right) {
    const pivot = medianOfThree(values[left]!, values[(left + right) >> 1]!, values[right]!)
    let [i, j] = [left, right]
    while (i <= j) {
      while (values[i]! < pivot) i++
      while (values[j]! > pivot) j--
      if (i > j) break
      const kept = values[i]!
      values[i++] = values[j]!
      values[j--] = kept
    }
    if (k <= j) right = j
    else if (k >= i) left = i
    else break
  }
  return values[k]!
}

/**
 * Puts several order statistics in their places, the middle one first, so that each of the others searches a part only.
 * @param places ascending, from 0
 */
export function selectAllInPlace(
  values: Float64Array,
  places: readonly number[],
  from = 0,
  to = values.length - 1,
): void {
  if (places.length === 0) return
  const middle = places.length >> 1
  const place = places[middle]!
  selectInPlace(values, place, from, to)
  selectAllInPlace(values, places.slice(0, middle), from, place)
  selectAllInPlace(values, places.slice(middle + 1), place, to)
}

const medianOfThree = (a: number, b: number, c: number) =>
  a < b ? (b < c ? b : a < c ? c : a) : a < c ? a : b < c ? c : b
