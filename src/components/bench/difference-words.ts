/** A relative difference in words: `2 × 10⁻¹⁵`, `0.3 %`. */
export function differenceWords(relative: number | null): string {
  if (relative === null) return '–'
  if (relative === 0) return 'the last digit'
  if (relative >= 1e-4) return relative > 10 ? 'more than ten times' : `${(100 * relative).toPrecision(2)}\u2009%`
  const [mantissa = '1', exponent = '0'] = relative.toExponential(0).split('e')
  const power = String(Number(exponent)).replace(/[-0-9]/g, (c) => (c === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(c)]!))
  return `${mantissa}\u2009×\u200910${power}`
}
