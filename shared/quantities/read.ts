import type { Reading } from '../problems'
import { unread } from '../problems'
import { codedDecimal, decimalOf, hasUnit, shiftDecimal, withPoint } from './decimal-text'
import type { Unit } from './unit'
import { UNIT_WORDS, UNITS } from './unit'

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

/**
 * Reads a value as an engineer types it: `4.7k`, `4k7`, `4.7 kΩ`, `4700`, `4.7e3`, `100 nF`, `0.1 µF`, `10meg`.
 * A bare number is in the base unit. Negative values are refused unless allowed, zero where it would be no part.
 *
 * @param text what was typed, of any length and content
 * @param unit unit of the field
 * @returns the value in SI units, the double nearest to the decimal typed; or a sentence
 * @example readQuantity('4k7', 'Ω') // { ok: true, value: 4700 }
 * @example readQuantity('0.1 µF', 'F') // { ok: true, value: 1e-7 }
 * Source: IEC 60062:2016 (letter codes); SI brochure, 9th edition (prefixes). `meg` is a habit of simulators.
 */
export function readQuantity(text: string, unit: Unit, options: ReadOptions = {}): Reading<number> {
  const { quantity, example } = UNIT_WORDS[unit]
  const what = options.name ? `${options.name} takes ${quantity}` : `${quantity} is wanted`
  const field = { unit, wanted: `${what}, such as ${example}.`, quantity }
  const typed = normalised(text, field.wanted)
  return typed.ok ? readAs(typed.value, typed.value, field, options) : typed
}

interface Field {
  unit: Unit
  quantity: string
  /** Second half of each sentence: what would do. */
  wanted: string
}

/** Plain spaces, plain minus, no blanks around; refused when empty or longer than any value. */
function normalised(text: string, wanted: string): Reading<string> {
  if (text.length > LENGTH_MAX) return unread('value-not-read', `This is ${text.length} characters long; ${wanted}`)
  const typed = text
    .replace(SPACES, ' ')
    .trim()
    .replace(/\u2212/g, '-')
  return typed === '' ? unread('value-not-read', `Nothing is typed; ${wanted}`) : { ok: true, value: typed }
}

/** @param whole all that was typed, for the sentence; `typed` may be a part of it */
function readAs(typed: string, whole: string, field: Field, options: ReadOptions): Reading<number> {
  const { unit, quantity, wanted } = field
  // Marks of writing direction and control characters would garble the sentence itself.
  const clean = whole.replace(/[\p{C}\p{Zl}\p{Zp}]/gu, '?')
  const shown = `“${clean}”`
  const pointed = withPoint(typed, shown, options.decimalComma ?? false)
  if (!pointed.ok) return pointed
  const decimal = decimalOf(pointed.value, unit)
  if (decimal === null) {
    const other = otherUnit(pointed.value, unit)
    if (other) return unread('unit-wrong', `${clean} is ${UNIT_WORDS[other].quantity}; ${wanted}`)
    return unread('value-not-read', `${shown} could not be read; ${wanted}`)
  }
  const value = Number(decimal)
  if (!Number.isFinite(value)) return unread('value-out-of-range', `${shown} is too large to be ${quantity}.`)
  if (value === 0 && /[1-9]/.test(decimal.split('e')[0]!))
    return unread('value-out-of-range', `${shown} is too small to be ${quantity}.`)
  if (value < 0 && !options.allowNegative) return unread('value-not-positive', `${shown} is negative; ${wanted}`)
  if (value === 0 && (unit === 'F' || unit === 'H') && !options.allowZero)
    return unread('value-not-positive', `${shown} is zero, which is no part; ${wanted}`)
  return { ok: true, value: value === 0 ? 0 : value }
}

/** The unit that a value not of this unit has: the one written out, else the one its letter code belongs to. */
const otherUnit = (typed: string, unit: Unit): Unit | undefined =>
  UNITS.find((one) => one !== unit && hasUnit(typed, one)) ??
  UNITS.find((one) => one !== unit && one !== 'Hz' && codedDecimal(typed, one) !== null)

/**
 * Reads a gain: a ratio (`-2`, `−2`, `10k`) or a level (`6 dB`), which sets |K| alone.
 * @returns the ratio, V/V, signed; `decibel` when a level was typed, so that the sign is the block's to give
 * @example readGain('-2') // { ok: true, value: { gain: -2, decibel: false } }
 * @example readGain('20 dB') // { ok: true, value: { gain: 10, decibel: true } }
 */
export function readGain(text: string, options: ReadOptions = {}): Reading<{ gain: number; decibel: boolean }> {
  const what = options.name ? `${options.name} takes a gain` : 'a gain is wanted'
  const field: Field = { unit: '', quantity: 'a gain', wanted: `${what}: a ratio such as −2, or a level such as 6 dB.` }
  const typed = normalised(text, field.wanted)
  if (!typed.ok) return typed
  const decibel = /db$/i.test(typed.value)
  const number = decibel ? typed.value.slice(0, -2).trimEnd() : typed.value
  const reading = readAs(number, typed.value, field, { ...options, allowNegative: true })
  if (!reading.ok) return reading
  if (!decibel) return { ok: true, value: { gain: reading.value, decibel } }
  const gain = 10 ** (reading.value / 20)
  if (!(gain > 0 && Number.isFinite(gain)))
    return unread('value-out-of-range', `${reading.value} dB is beyond any gain; ${field.wanted}`)
  return { ok: true, value: { gain, decibel } }
}

/**
 * Reads a percentage as a fraction; ppm is taken too, and ± before it. A bare number is in per cent.
 * @example readPercent('1 %') // { ok: true, value: 0.01 }
 * @example readPercent('25 ppm') // { ok: true, value: 0.000025 }
 */
export function readPercent(text: string, options: ReadOptions = {}): Reading<number> {
  const what = options.name ? `${options.name} takes a percentage` : 'a percentage is wanted'
  const field: Field = { unit: '%', quantity: 'a percentage', wanted: `${what}, such as 1 %.` }
  const typed = normalised(text, field.wanted)
  if (!typed.ok) return typed
  const number = typed.value.replace(/^±\s?/, '')
  const perMillion = /^[^%]*ppm$/.test(number)
  const reading = readAs(perMillion ? number.slice(0, -3).trimEnd() : number, typed.value, field, options)
  return reading.ok ? { ok: true, value: shiftDecimal(reading.value, perMillion ? -6 : -2) } : reading
}

/**
 * Reads a temperature in kelvin; a bare number is in °C.
 * @example readTemperature('25 °C') // { ok: true, value: 298.15 }
 * @example readTemperature('300 K') // { ok: true, value: 300 }
 */
export function readTemperature(text: string, options: ReadOptions = {}): Reading<number> {
  const what = options.name ? `${options.name} takes a temperature` : 'a temperature is wanted'
  const field: Field = { unit: 'K', quantity: 'a temperature', wanted: `${what}, such as 25 °C or 300 K.` }
  const typed = normalised(text, field.wanted)
  if (!typed.ok) return typed
  const celsius = /^([^°℃CK]*)(?:° ?C|℃|C)$/.exec(typed.value)?.[1]?.trimEnd()
  const reading = readAs(celsius ?? typed.value, typed.value, field, { ...options, allowNegative: true })
  if (!reading.ok) return reading
  const inKelvin = typed.value.endsWith('K')
  // −273.14 + 273.15 is 0.01 only after rounding; a nanokelvin is below anything typed.
  const kelvin = inKelvin ? reading.value : Number((reading.value + 273.15).toFixed(9))
  if (kelvin > 0) return { ok: true, value: kelvin }
  return unread('value-out-of-range', `${typed.value} is not above absolute zero; ${field.wanted}`)
}
