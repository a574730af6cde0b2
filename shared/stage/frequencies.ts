/** Frequencies evenly spaced in their logarithm, both ends included, Hz. */
export function logFrequencies(fromHz: number, toHz: number, count: number): Float64Array {
  const step = Math.log(toHz / fromHz) / (count - 1)
  return Float64Array.from({ length: count }, (_, k) => fromHz * Math.exp(k * step))
}
