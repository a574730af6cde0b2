import type { Unit } from './unit'

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
const PLAIN: Unit[] = ['', '%', 'dB', '°', 'K']

/**
 * A value in engineering notation: four significant digits, a thin space before the unit, a true minus.
 * @param value in SI units; NaN and infinities give an en dash
 * @example formatQuantity(44200, 'Ω') // '44.20 kΩ' with a thin space
 * @example formatQuantity(1.5e-9, 'F', { trim: true }) // '1.5 nF' with a thin space
 * Source: SI brochure, 9th edition, 5.4; ISO 80000-1.
 */
export function formatQuantity(value: number, unit: Unit, options: FormatOptions = {}): string {
  if (!Number.isFinite(value)) return '–'
  const { mantissa, exponent } = engineering(value, options.digits ?? 4, PLAIN.includes(unit))
  const digits = options.trim ? trimmed(mantissa) : mantissa
  const prefix = PREFIXES[exponent]
  if (options.coded && prefix !== undefined && value > 0 && (unit === 'Ω' || unit === 'F' || unit === 'H'))
    return code(trimmed(mantissa), prefix, unit)
  const number = marked(digits, options)
  if (prefix === undefined)
    return `${number}${exponent ? `${THIN_SPACE}×${THIN_SPACE}10${superscript(exponent)}` : ''}${unit && THIN_SPACE + unit}`
  return prefix + unit === '' ? number : `${number}${THIN_SPACE}${prefix}${unit}`
}

/** Mantissa text and power of ten, rounding carried over: 999.96 becomes 1.000 × 10³. */
function engineering(value: number, digits: number, plain: boolean): { mantissa: string; exponent: number } {
  if (value === 0) return { mantissa: (0).toFixed(Math.max(0, digits - 1)), exponent: 0 }
  const [m = '0', e = '0'] = value.toExponential(digits - 1).split('e')
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

/** IEC 60062: the letter takes the place of the decimal mark. */
function code(number: string, prefix: string, unit: Unit): string {
  const letter = prefix || (unit === 'Ω' ? 'R' : unit)
  const [whole = '0', fraction = ''] = number.split('.')
  return `${whole}${letter}${fraction}`
}

/** A number with a point and no unit, for spreadsheets: the shortest that reads back to the same double. */
export const plainNumber = (value: number): string => String(value)

/** A gain ratio as a level: `6.021 dB`. */
export const formatDecibel = (ratio: number, options: FormatOptions = {}): string =>
  formatDb(20 * Math.log10(Math.abs(ratio)), options)

/** A level in dB with two decimals. */
export function formatDb(level: number, options: FormatOptions = {}): string {
  if (!Number.isFinite(level)) return level === -Infinity ? `${MINUS}∞${THIN_SPACE}dB` : '–'
  const text = level.toFixed(2)
  return `${marked(Number(text) === 0 ? '0.00' : text, options)}${THIN_SPACE}dB`
}

/** A fraction as a percentage with two decimals: `+0.02 %`. */
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
 * The shortest text for addresses, `22.1k`, that readQuantity takes back to exactly the same double.
 * @example typedValue(22100, 'Ω') // '22.1k'
 */
export function typedValue(value: number, unit: Unit): string {
  if (!Number.isFinite(value)) return ''
  const plain = String(value)
  if (PLAIN.includes(unit) || value === 0) return plain
  const [m = '0', e = '0'] = value.toExponential().split('e')
  const exponent = 3 * Math.floor(Number(e) / 3)
  const prefix = TYPED_PREFIXES.find((one) => one.exponent === exponent)
  if (!prefix) return plain
  const text = shift(m, Number(e) - exponent) + prefix.letter
  return text.length <= plain.length || exponent !== 0 ? text : plain
}
