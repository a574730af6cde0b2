import type { Reading } from '../problems'
import { unread } from '../problems'
import type { Unit } from './unit'
import { CODE_LETTERS, PREFIX_EXPONENTS, UNIT_SPELLINGS, UNIT_WORDS, UNITS } from './unit'

export interface ReadOptions {
  /** The person writes the decimal mark as a comma. */
  decimalComma?: boolean
  allowNegative?: boolean
  /** Zero is taken though the unit is that of a part which cannot be zero. */
  allowZero?: boolean
  /** Name of the field, for the sentence. */
  name?: string
}

const LENGTH_MAX = 100
const SPACES = /[\s\u00a0\u2000-\u200a\u202f\u205f\u3000]+/g
const NUMBER = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/

/**
 * Reads a value as an engineer types it: `4.7k`, `4k7`, `4.7 kΩ`, `4700`, `4.7e3`, `100 nF`, `0.1 µF`, `10meg`.
 * A bare number is in the base unit.
 *
 * @param text what was typed, of any length and content
 * @param unit unit of the field
 * @returns the value in SI units, the double nearest to the decimal typed; or a sentence
 * @example readQuantity('4k7', 'Ω') // { ok: true, value: 4700 }
 * @example readQuantity('0.1 µF', 'F') // { ok: true, value: 1e-7 }
 * Source: IEC 60062:2016 (letter codes); SI brochure, 9th edition (prefixes). `meg` is a habit of simulators.
 */
export function readQuantity(text: string, unit: Unit, options: ReadOptions = {}): Reading<number> {
  const what = options.name
    ? `${options.name} takes ${UNIT_WORDS[unit].quantity}`
    : `${UNIT_WORDS[unit].quantity} is wanted`
  const wanted = `${what}, such as ${UNIT_WORDS[unit].example}.`
  if (text.length > LENGTH_MAX) return unread('value-not-read', `This is ${text.length} characters long; ${wanted}`)
  const shown = `“${text.trim().replace(/\p{C}/gu, '?')}”`
  const typed = text
    .replace(SPACES, ' ')
    .trim()
    .replace(/\u2212/g, '-')
  if (typed === '') return unread('value-not-read', `Nothing is typed; ${wanted}`)
  const pointed = withPoint(typed, options)
  if (!pointed.ok) return pointed
  const decimal = decimalOf(pointed.value, unit)
  if (decimal === null) return unread(...misread(typed, shown, unit, wanted))
  const value = Number(decimal)
  if (!Number.isFinite(value))
    return unread('value-out-of-range', `${shown} is too large to be ${UNIT_WORDS[unit].quantity}.`)
  if (value === 0 && /[1-9]/.test(decimal.split('e')[0]!))
    return unread('value-out-of-range', `${shown} is too small to be ${UNIT_WORDS[unit].quantity}.`)
  if (value < 0 && !options.allowNegative) return unread('value-not-positive', `${shown} is negative; ${wanted}`)
  if (value === 0 && (unit === 'F' || unit === 'H') && !options.allowZero)
    return unread('value-not-positive', `${shown} is zero, which is no part; ${wanted}`)
  return { ok: true, value: value === 0 ? 0 : value }
}

/** A comma as decimal mark: taken where it can be nothing else, or where the person writes it so. */
function withPoint(typed: string, { decimalComma = false }: ReadOptions): Reading<string> {
  if (!typed.includes(',')) return { ok: true, value: typed }
  const [whole = '', after = ''] = typed.split(',')
  const parts = typed.split(',').length
  const digits = /^\d*/.exec(after)![0].length
  if (parts > 2 || typed.includes('.'))
    return unread(
      'value-not-read',
      `“${typed}” has several decimal marks. Write digits without grouping, such as ${typed.replace(/,/g, '')}.`,
    )
  if (!decimalComma && digits === 3)
    return unread(
      'value-not-read',
      `“${typed}” can be read as ${whole}.${after} or as ${whole}${after}. Write one of these.`,
    )
  return { ok: true, value: `${whole}.${after}` }
}

/** The decimal text of a value, or null when it is none of this unit. */
function decimalOf(typed: string, unit: Unit): string | null {
  return coded(typed, unit) ?? prefixed(typed, unit)
}

/** IEC 60062: the letter stands for the decimal mark. 4K7, R47, 10R, 1µ5. */
function coded(typed: string, unit: Unit): string | null {
  const letters = CODE_LETTERS[unit]
  const match = letters && /^([+-]?)(\d*)(\p{L}|µ)(\d*)$/u.exec(typed)
  if (!match) return null
  const [, sign = '', whole = '', letter = '', fraction = ''] = match
  const exponent = letters[letter]
  if (exponent === undefined || whole + fraction === '') return null
  return `${sign}${whole || '0'}.${fraction || '0'}e${exponent}`
}

/** A number, then perhaps a prefix, then perhaps the unit, each with or without a space before it. */
function prefixed(typed: string, unit: Unit): string | null {
  const number = NUMBER.exec(typed)?.[0]
  if (!number) return null
  const rest = typed.slice(number.length).trim()
  const exponent = exponentOf(rest, unit)
  if (exponent === null) return null
  const [mantissa = '', power = '0'] = number.toLowerCase().split('e')
  return `${mantissa}e${Number(power) + exponent}`
}

/** Power of ten that a prefix and unit give, or null when they are none of this unit. */
function exponentOf(rest: string, unit: Unit): number | null {
  if (rest === '') return 0
  for (const spelling of UNIT_SPELLINGS[unit]) {
    if (rest === spelling) return 0
    if (rest.endsWith(spelling)) {
      const exponent = prefixExponent(rest.slice(0, -spelling.length).trimEnd())
      // 5 % has no prefix; a unit of several letters must not swallow one of its own.
      if (exponent !== null && unit !== '%') return exponent
    }
  }
  return unit === 'K' || unit === '%' ? null : prefixExponent(rest)
}

const prefixExponent = (text: string): number | null =>
  /^meg$/i.test(text) ? 6 : Object.hasOwn(PREFIX_EXPONENTS, text) ? PREFIX_EXPONENTS[text]! : null

/** The sentence for a value that is none of this unit: the unit it has, else that it was not read. */
function misread(typed: string, shown: string, unit: Unit, wanted: string): ['unit-wrong' | 'value-not-read', string] {
  const other = UNITS.find((one) => one !== unit && UNIT_SPELLINGS[one].length > 0 && hasUnit(typed, one))
  const also = other ?? UNITS.find((one) => one !== unit && one !== 'Hz' && coded(typed, one) !== null)
  if (also) return ['unit-wrong', `${shown} is ${UNIT_WORDS[also].quantity}; ${wanted}`]
  return ['value-not-read', `${shown} could not be read; ${wanted}`]
}

const hasUnit = (typed: string, unit: Unit): boolean => {
  const number = NUMBER.exec(typed)?.[0]
  const rest = number && typed.slice(number.length).trim()
  return (
    Boolean(rest) &&
    UNIT_SPELLINGS[unit].some((spelling) => rest!.endsWith(spelling)) &&
    exponentOf(rest!, unit) !== null
  )
}

/**
 * Reads a gain: a ratio (`-2`, `−2`, `10k`) or a level (`6 dB`), which sets |K| alone.
 * @example readGain('-2') // { ok: true, value: { gain: -2, decibel: false } }
 */
export function readGain(text: string, options: ReadOptions = {}): Reading<{ gain: number; decibel: boolean }> {
  const level = /^(.*?)\s*db$/i.exec(text.trim().slice(0, LENGTH_MAX))
  const reading = readQuantity(level ? level[1]! : text, '', { ...options, allowNegative: true })
  if (!reading.ok)
    return unread(
      'value-not-read',
      `“${text.slice(0, 60).trim()}” is not a gain. Write a ratio such as −2, or a level such as 6 dB.`,
    )
  if (!level) return { ok: true, value: { gain: reading.value, decibel: false } }
  const gain = 10 ** (reading.value / 20)
  if (!(gain > 0) || !Number.isFinite(gain))
    return unread('value-out-of-range', `${reading.value} dB is beyond any gain.`)
  return { ok: true, value: { gain, decibel: true } }
}

/**
 * Reads a percentage as a fraction; ppm is taken too. A bare number is in per cent.
 * @example readPercent('1 %') // { ok: true, value: 0.01 }
 */
export function readPercent(text: string): Reading<number> {
  const match = /^([^%p]*?)\s*(%|ppm)?$/.exec(text.trim().slice(0, LENGTH_MAX))
  const reading = match && readQuantity(match[1]!.replace(/^±/, ''), '')
  if (!reading?.ok) return unread('value-not-read', `“${text.slice(0, 60)}” is not a percentage, such as 1 %.`)
  return { ok: true, value: match![2] === 'ppm' ? Number(`${reading.value}e-6`) : Number(`${reading.value}e-2`) }
}

/**
 * Reads a temperature in kelvin; a bare number and °C are Celsius.
 * @example readTemperature('25 °C') // { ok: true, value: 298.15 }
 */
export function readTemperature(text: string): Reading<number> {
  const match = /^(.*?)\s*(°\s*C|℃|C|K)?$/.exec(text.trim().slice(0, LENGTH_MAX))
  const reading = match && readQuantity(match[1]!, '', { allowNegative: true })
  const kelvin = reading?.ok
    ? match![2] === 'K'
      ? reading.value
      : Number((reading.value + 273.15).toPrecision(12))
    : NaN
  if (kelvin > 0) return { ok: true, value: kelvin }
  return unread('value-not-read', `“${text.slice(0, 60)}” is not a temperature, such as 25 °C or 300 K.`)
}
