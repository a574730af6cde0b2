import type { Reading } from '../problems'
import { unread } from '../problems'
import type { Unit } from './unit'
import { CODE_LETTERS, PREFIX_EXPONENTS, UNIT_MULTIPLES, UNIT_SPELLINGS } from './unit'

const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/
/** Beyond any double; keeps an exponent of fifty digits from becoming one in exponent notation itself. */
const EXPONENT_MAX = 9999

/**
 * Moves the decimal point of a number without touching its digits: 4.7 by −9 is 4.7e-9, which 4.7·1e-9 is not.
 * @example shiftDecimal(4.7, -9) // 4.7e-9
 */
export function shiftDecimal(value: number, places: number): number {
  const [mantissa = '0', exponent = '0'] = value.toExponential().split('e')
  return Number(`${mantissa}e${Number(exponent) + places}`)
}

/** The decimal text of a typed value in the base unit, such as `4.7e3`; null when it is no value of this unit. */
export const decimalOf = (typed: string, unit: Unit): string | null =>
  codedDecimal(typed, unit) ?? prefixed(typed, unit)

/** IEC 60062: the letter stands for the decimal mark. 4K7, R47, 10R, 1µ5. */
export function codedDecimal(typed: string, unit: Unit): string | null {
  const letters = CODE_LETTERS[unit]
  const match = letters && /^([+-]?)(\d*)(\p{L}|µ)(\d*)$/u.exec(typed)
  if (!match) return null
  const [, sign = '', whole = '', letter = '', fraction = ''] = match
  if (!Object.hasOwn(letters, letter) || whole + fraction === '') return null
  return `${sign}${whole || '0'}.${fraction || '0'}e${letters[letter]!}`
}

/** A number, then perhaps a prefix, then perhaps the unit, each with or without a space before it. */
function prefixed(typed: string, unit: Unit): string | null {
  const number = NUMBER.exec(typed)?.[0]
  if (!number) return null
  const exponent = exponentOf(typed.slice(number.length).trim(), unit)
  if (exponent === null) return null
  const [mantissa = '', power = '0'] = number.toLowerCase().split('e')
  return `${mantissa}e${Math.max(-EXPONENT_MAX, Math.min(EXPONENT_MAX, Number(power))) + exponent}`
}

/** Power of ten that a prefix and unit give, or null when they are none of this unit. */
function exponentOf(rest: string, unit: Unit): number | null {
  if (rest === '') return 0
  return unitExponent(rest, unit) ?? (takesPrefix(unit) ? prefixExponent(rest) : null)
}

function unitExponent(rest: string, unit: Unit): number | null {
  const multiples = UNIT_MULTIPLES[unit] ?? {}
  if (Object.hasOwn(multiples, rest)) return multiples[rest]!
  for (const spelling of UNIT_SPELLINGS[unit]) {
    if (rest === spelling) return 0
    if (!rest.endsWith(spelling) || !takesPrefix(unit)) continue
    const exponent = prefixExponent(rest.slice(0, -spelling.length).trimEnd())
    if (exponent !== null) return exponent
  }
  return null
}

/** Kelvin takes none: 300 k or 300 mK is a slip of the hand. */
const takesPrefix = (unit: Unit): boolean => unit !== 'K' && unit !== '%' && unit !== '°' && unit !== 'dB'

const prefixExponent = (text: string): number | null =>
  /^meg$/i.test(text) ? 6 : Object.hasOwn(PREFIX_EXPONENTS, text) ? PREFIX_EXPONENTS[text]! : null

/** True when the text is a number with this very unit written out. */
export function hasUnit(typed: string, unit: Unit): boolean {
  const number = NUMBER.exec(typed)?.[0]
  const rest = number === undefined ? '' : typed.slice(number.length).trim()
  return rest !== '' && unitExponent(rest, unit) !== null
}

const GROUPED = [
  { pattern: /^[+-]?\d{1,3}(?:,\d{3})+(?!,)(?:\.\d*)?\D*$/, group: ',', mark: '.' },
  { pattern: /^[+-]?\d{1,3}(?:\.\d{3})+(?:,\d*)?\D*$/, group: '.', mark: ',' },
]

/**
 * The typed text with a point as decimal mark. A comma is taken where it can be nothing else, or where the person
 * writes it so; `1,000` is refused with both readings.
 */
export function withPoint(typed: string, shown: string, decimalComma: boolean): Reading<string> {
  const [whole = '', after = '', ...more] = typed.split(',')
  if (!typed.includes(',')) return { ok: true, value: typed }
  if (more.length > 0 || typed.includes('.')) {
    const grouped = GROUPED.find(({ pattern }) => pattern.test(typed))
    const instead = grouped && typed.replaceAll(grouped.group, '').replace(grouped.mark, '.')
    return unread(
      'value-not-read',
      `${shown} has several decimal marks. Write digits without grouping${instead ? `, such as ${instead}` : ''}.`,
    )
  }
  if (!decimalComma && /^[+-]?[1-9]\d{0,2}$/.test(whole) && /^\d{3}(?!\d)/.test(after))
    return unread(
      'value-not-read',
      `${shown} can be read as ${whole}.${after} or as ${whole}${after}. Write one of these.`,
    )
  return { ok: true, value: `${whole}.${after}` }
}
