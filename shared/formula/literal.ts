import type { Reading } from '../problems'
import { readPercent, readQuantity } from '../quantities/read'
import type { Unit } from '../quantities/unit'
import { UNIT_MULTIPLES, UNIT_SPELLINGS } from '../quantities/unit'
import { quoted } from './place'
import type { FormulaKind } from './tree'

/** A quantity written in a formula; `prefixed` without a unit fits any dimension. */
export interface Literal {
  text: string
  value: number
  unit: Unit | null
  prefixed: boolean
}

/** Units that may follow a number, longest spelling first. */
const UNITS_OF_LITERALS: Unit[] = ['Ω', 'F', 'H', 'Hz', 's', 'V', 'A', 'K', 'W', 'V/s', 'V/√Hz', 'A/√Hz', 'rad/s']
const SPELLINGS = UNITS_OF_LITERALS.flatMap((unit) =>
  [...UNIT_SPELLINGS[unit], ...Object.keys(UNIT_MULTIPLES[unit] ?? {})].map((spelling) => ({ spelling, unit })),
).sort((a, b) => b.spelling.length - a.spelling.length)

const escaped = (text: string) => text.replace(/[/()]/g, '\\$&')
const END = '(?![\\p{L}\\p{N}_])'
const PREFIX = '(?:meg|[TGMkKmµμunpf])'

const NUMBER = /(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/y
const CODE = new RegExp(`R\\d*${END}|[TGMKkmµμunpV]\\d+${END}`, 'uy')
const WITH_UNIT = new RegExp(
  ` ?${PREFIX}? ?(${SPELLINGS.map(({ spelling }) => escaped(spelling)).join('|')})${END}`,
  'uy',
)
const WITH_PREFIX = new RegExp(` ?${PREFIX}${END}`, 'uy')
const SHARE = new RegExp(` ?(?:%|ppm)${END}`, 'uy')
const REFUSED_UNIT = new RegExp(` ?(?:dB[a-zA-Z]?|° ?C?|℃|deg)${END}`, 'uy')
const WORD = /[\p{L}\p{N}_.]{1,30}/uy
const PLAIN_NAME = /^[A-Za-zΑ-Ωα-ω][A-Za-z0-9_Α-Ωα-ω]*$/

/**
 * Reads the quantity at a place of a formula: digits, then a prefix, a unit, both, or a letter code of IEC 60062,
 * directly or one space on. `300 K` is kelvin and `300K` is 300 000, as on drawings.
 *
 * @returns null where no number begins
 * @example literalAt('1/30k', 2, 'value') // { ok: true, value: { text: '30k', value: 30000, … } }
 */
export function literalAt(
  text: string,
  at: number,
  kind: FormulaKind,
): { ok: true; value: Literal } | { ok: false; detail: string } | null {
  const number = matchAt(NUMBER, text, at)
  if (number === null) return null
  const after = at + number.length
  const refused = matchAt(REFUSED_UNIT, text, after)
  if (refused !== null)
    return /dB/.test(refused)
      ? no(`${number} dB is a level; a formula takes the ratio, or compares with dB(…) of a ratio.`)
      : no(`${number}${refused} cannot be used here: angles are in radians, temperatures in kelvin.`)
  const tail =
    matchAt(CODE, text, after) ??
    matchAt(WITH_UNIT, text, after) ??
    matchAt(SHARE, text, after) ??
    matchAt(WITH_PREFIX, text, after) ??
    ''
  const word = matchAt(WORD, text, after + tail.length)
  if (word !== null) return no(besideNumber(number + tail, word))
  if (kind === 'response' && tail.trim() === 's') return no(`${number}${tail} would be seconds. Write ${number}*s.`)
  return valueOf(number, tail)
}

const no = (detail: string) => ({ ok: false as const, detail })

const besideNumber = (number: string, word: string) =>
  `${quoted(number + word)} is not a value.${PLAIN_NAME.test(word) ? ` For a product write ${number}*${word}.` : ''}`

function valueOf(number: string, tail: string): { ok: true; value: Literal } | { ok: false; detail: string } {
  const text = number + tail
  const [unit, prefixed, reading] = readTail(text, tail)
  return reading.ok
    ? { ok: true, value: { text, value: reading.value, unit, prefixed } }
    : no(reading.problems[0].detail)
}

function readTail(text: string, tail: string): [unit: Unit | null, prefixed: boolean, reading: Reading<number>] {
  if (/^ ?(?:%|ppm)$/.test(tail)) return ['%', false, readPercent(text)]
  if (/^[RV]/.test(tail) && tail !== 'V' && !tail.includes('/')) {
    const unit = tail.startsWith('R') ? 'Ω' : 'V'
    return [unit, false, readQuantity(text, unit, { allowZero: true })]
  }
  // 4k7 fits a resistance and a frequency: a code says how much, not of what.
  if (/^\S\d+$/.test(tail))
    return [null, true, readQuantity(text, /^[TGMKk]/.test(tail) ? 'Ω' : 'F', { allowZero: true })]
  const unit = tail === '' || tail === 'K' ? null : unitOf(tail)
  return [unit, unit === null && tail !== '', readQuantity(text, unit ?? '', { allowZero: true })]
}

/** The unit that a tail ends with, when what stands before it is a prefix or nothing. */
function unitOf(tail: string): Unit | null {
  for (const { spelling, unit } of SPELLINGS)
    if (tail.endsWith(spelling) && new RegExp(`^ ?${PREFIX}? ?$`).test(tail.slice(0, -spelling.length))) return unit
  return null
}

/** What a sticky pattern matches at a place, or null. */
export function matchAt(pattern: RegExp, text: string, at: number): string | null {
  pattern.lastIndex = at
  return pattern.exec(text)?.[0] ?? null
}
