const NUMBER = /^([+-]?(?:\d+\.?\d*|\.\d+))(?:e([+-]?\d{1,9}))?([a-zµμΩω%]*)$/i
const POWERS: readonly (readonly [string, number])[] = [
  ['meg', 6],
  ['t', 12],
  ['g', 9],
  ['k', 3],
  ['m', -3],
  ['u', -6],
  ['µ', -6],
  ['μ', -6],
  ['n', -9],
  ['p', -12],
  ['f', -15],
  ['a', -18],
]

/**
 * A number as SPICE writes it: decimal or exponent notation, then perhaps a scale in either case (t g meg k m u n p f a),
 * then letters of a unit, which are ignored. As in every SPICE, M is milli, and F alone is femto.
 * @returns the value, correctly rounded; null when it is no number or no finite one
 * @example spiceNumber('4.7uF') // 4.7e-6
 * Source: L. W. Nagel, SPICE2, Memorandum ERL-M520, University of California (1975), appendix 1.
 */
export function spiceNumber(text: string): number | null {
  const match = NUMBER.exec(text)
  if (!match) return null
  const [, mantissa = '', exponent = '0', letters = ''] = match
  const after = letters.toLowerCase()
  // A thousandth of an inch; the one scale that is no power of ten.
  if (after.startsWith('mil')) return finite(Number(`${mantissa}e${exponent}`) * 25.4e-6)
  const power = POWERS.find(([scale]) => after.startsWith(scale))?.[1] ?? 0
  return finite(Number(`${mantissa}e${Number(exponent) + power}`))
}

const finite = (value: number) => (Number.isFinite(value) ? value : null)
