const PREFIXES: Record<number, string> = { [-2]: 'µ', [-1]: 'm', 0: '', 1: 'k', 2: 'M', 3: 'G', 4: 'T' }

/** A power of ten at an axis: 10 k for 4. */
export function decadeWords(power: number): string {
  const step = Math.floor(power / 3)
  const prefix = PREFIXES[step]
  return prefix === undefined ? '' : `${10 ** (power - 3 * step)}${prefix && `\u2009${prefix}`}`
}
