import { shiftDecimal } from './decimal-text'
import type { Unit } from './unit'
import { CODE_LETTERS } from './unit'

export interface FormatOptions {
  /** Significant digits, 4 by default. */
  digits?: number
  decimalComma?: boolean
  /** IEC 60062 letter code: 4k7, 1n5. */
  coded?: boolean
  /** Leaves out zeros at the end: 44.2 kΩ. */
  trim?: boolean
}

const THIN_SPACE = '\u2009'
const MINUS = '\u2212'
const PREFIXES: Record<number, string> = {
  12: 'T',
  9: 'G',
  6: 'M',
  3: 'k',
  0: '',
  [-3]: 'm',
  [-6]: 'µ',
  [-9]: 'n',
  [-12]: 'p',
  [-15]: 'f',
}
/** Ratios and the like take no prefix. */
const PLAIN: Unit[] = ['', '%', 'dB', '°', 'K', 'V/s']
const DIGITS_MAX = 17

/**
 * A value in engineering notation: four significant digits, a thin space before the unit, a true minus.
 * @param value in SI units; NaN and infinities give an en dash
 * @example formatQuantity(44200, 'Ω') // '44.20 kΩ' with a thin space
 * @example formatQuantity(1.5e-9, 'F', { trim: true }) // '1.5 nF' with a thin space
 * Source: SI brochure, 9th edition, 5.4; ISO 80000-1.
 */
export function formatQuantity(value: number, unit: Unit, options: FormatOptions = {}): string {
  if (!Number.isFinite(value)) return '–'
  // Slew rates are written per microsecond in the trade.
  if (unit === 'V/s') return withUnit(shiftDecimal(value, -6), unit, 'V/µs', options)
  return withUnit(value, unit, unit, options)
}

function withUnit(value: number, unit: Unit, shownUnit: string, options: FormatOptions): string {
  const plain = PLAIN.includes(unit)
  const { mantissa, exponent } = engineering(value, options.digits ?? 4, plain)
  const digits = options.trim ? trimmed(mantissa) : mantissa
  const prefix = plain && exponent !== 0 ? undefined : PREFIXES[exponent]
  const code = options.coded && value > 0 ? coded(trimmed(mantissa), exponent, unit) : null
  if (code !== null) return code
  const number = marked(digits, options)
  const power = prefix === undefined ? `${THIN_SPACE}×${THIN_SPACE}10${superscript(exponent)}` : ''
  const symbol = (prefix ?? '') + shownUnit
  return number + power + (symbol && THIN_SPACE + symbol)
}

/** Mantissa text and power of ten, rounding carried over: 999.96 becomes 1.000 × 10³. */
function engineering(value: number, digits: number, plain: boolean): { mantissa: string; exponent: number } {
  if (value === 0) return { mantissa: '0', exponent: 0 }
  const places = Math.min(DIGITS_MAX, Math.max(1, Math.round(digits))) - 1
  const [m = '0', e = '0'] = value.toExponential(places).split('e')
  const power = Number(e)
  const exponent = plain && power >= -4 && power < 7 ? 0 : 3 * Math.floor(power / 3)
  return { mantissa: shift(m, power - exponent), exponent }
}

/** Moves the decimal point of a mantissa without touching its digits. */
function shift(mantissa: string, places: number): string {
  const sign = mantissa.startsWith('-') ? '-' : ''
  const digits = mantissa.replace(/[-.]/g, '')
  if (places < 0) return `${sign}0.${'0'.repeat(-places - 1)}${digits}`
  const whole = digits.slice(0, places + 1).padEnd(places + 1, '0')
  const fraction = digits.slice(places + 1)
  return fraction ? `${sign}${whole}.${fraction}` : `${sign}${whole}`
}

const trimmed = (number: string) => (number.includes('.') ? number.replace(/\.?0+$/, '') : number)

const marked = (number: string, { decimalComma }: FormatOptions) => {
  const signed = number.replace('-', MINUS)
  return decimalComma ? signed.replace('.', ',') : signed
}

const superscript = (exponent: number) =>
  String(exponent).replace(/[-0-9]/g, (c) => (c === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(c)]!))

/** IEC 60062: the letter takes the place of the decimal mark; null where the standard has no letter. */
function coded(number: string, exponent: number, unit: Unit): string | null {
  const [whole = '0', fraction = ''] = number.split('.')
  // R47: milliohms have no letter, so their digits stand behind the R.
  if (unit === 'Ω' && exponent === -3) return `R${trimmed(`0.${whole.padStart(3, '0')}${fraction}`).slice(2)}`
  const letter = PREFIXES[exponent] || (unit === 'Ω' ? 'R' : unit)
  const known = (unit === 'Ω' || unit === 'F' || unit === 'H') && CODE_LETTERS[unit]?.[letter] === exponent
  if (!known) return null
  return `${whole}${letter}${fraction}`
}

/** A frequency in engineering notation: `2.400 kHz`. */
export const formatFrequency = (frequencyHz: number, options: FormatOptions = {}): string =>
  formatQuantity(frequencyHz, 'Hz', options)

/**
 * A number with a point and no unit, for spreadsheets: the shortest that reads back to the same double; empty for NaN
 * and infinities.
 * @example plainNumber(1.5e-9) // '1.5e-9'
 */
export const plainNumber = (value: number): string => (Number.isFinite(value) ? String(value) : '')

/** A gain ratio as a level, by its size alone: −2 gives `6.02 dB`. */
export const formatDecibel = (ratio: number, options: FormatOptions = {}): string =>
  formatDb(20 * Math.log10(Math.abs(ratio)), options)

/** A level in dB with two decimals. */
export function formatDb(level: number, options: FormatOptions = {}): string {
  if (!Number.isFinite(level)) return level === -Infinity ? `${MINUS}∞${THIN_SPACE}dB` : '–'
  const text = level.toFixed(2)
  return `${marked(Number(text) === 0 ? '0.00' : text, options)}${THIN_SPACE}dB`
}

/** A fraction as a percentage with two decimals, none from 100 % on: `+0.02 %`. */
export function formatPercent(fraction: number, options: FormatOptions & { sign?: boolean } = {}): string {
  if (!Number.isFinite(fraction)) return '–'
  const percent = 100 * fraction
  const text = Math.abs(percent) >= 100 ? percent.toFixed(0) : percent.toFixed(2)
  const number = Number(text) === 0 ? text.replace('-', '') : text
  const shown = options.trim ? trimmed(number) : number
  const signed = options.sign && Number(shown) >= 0 ? `+${shown}` : shown
  return `${marked(signed, options)}${THIN_SPACE}%`
}

/** Degrees with one decimal from radians. */
export const formatDegrees = (rad: number, options: FormatOptions = {}): string => {
  if (!Number.isFinite(rad)) return '–'
  const text = ((180 * rad) / Math.PI).toFixed(1)
  return `${marked(Number(text) === 0 ? '0.0' : text, options)}°`
}

const TYPED_PREFIXES = Object.entries(PREFIXES).map(([exponent, letter]) => ({
  exponent: Number(exponent),
  letter: letter === 'µ' ? 'u' : letter,
}))

/**
 * The shortest text for addresses, `22.1k`, that readQuantity takes back to exactly the same double. Temperatures carry
 * their K, as a bare one would be read in °C.
 * @example typedValue(22100, 'Ω') // '22.1k'
 */
export function typedValue(value: number, unit: Unit): string {
  if (!Number.isFinite(value)) return ''
  const plain = String(value)
  if (unit === 'K') return `${plain}K`
  if (PLAIN.includes(unit) || value === 0) return plain
  const [m = '0', e = '0'] = value.toExponential().split('e')
  const exponent = 3 * Math.floor(Number(e) / 3)
  const prefix = TYPED_PREFIXES.find((one) => one.exponent === exponent)
  return prefix ? shift(m, Number(e) - exponent) + prefix.letter : plain
}
