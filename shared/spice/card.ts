import type { PassiveKind } from '../circuit/part'
import type { Problem } from '../problems'
import { spiceNumber } from './number'
import type { Card, Word } from './scan'

/** A card that was understood; nodes are still words of its own subcircuit. */
export type ReadCard =
  | { kind: 'passive'; name: Word; passive: PassiveKind; nodes: Word[]; value: number; noisy: boolean }
  | { kind: 'controlled'; name: Word; nodes: Word[]; gain: number }
  | { kind: 'source'; name: Word; nodes: Word[]; dcVolt: number; acVolt: number; acPhaseRad: number }
  | { kind: 'instance'; name: Word; nodes: Word[]; of: Word }

export type CardReading = { ok: true; card: ReadCard } | { ok: false; problem: Problem }

export const NAME_CHARS_MAX = 64
const PASSIVES = {
  r: { passive: 'resistor', form: 'R1 in out 10k', value: 'resistance' },
  c: { passive: 'capacitor', form: 'C1 in out 10n', value: 'capacitance' },
  l: { passive: 'inductor', form: 'L1 in out 10m', value: 'inductance' },
} as const
const CONTROLLED_FORM = 'E1 out 0 plus minus 1e9'
const SOURCE_FORM = 'Vin in 0 DC 0 AC 1 0'
const INSTANCE_FORM = 'X1 in out NAME'
const SHAPES = new Set(['sin', 'pulse', 'pwl', 'exp', 'sffm', 'am'])

export const problemAt = ({ line, column }: Word, detail: string): Problem => ({
  code: 'circuit-not-read',
  detail,
  line,
  column,
})
/** What was written, cut to what a sentence bears. */
export const shown = (text: string) => (text.length > 40 ? `${text.slice(0, 40)}…` : text)

/** Reads one card of R, C, L, E, V or X. Shapes in time (SIN, PULSE, …) of a source are left out. */
export function readCard(card: Card): CardReading {
  const odd = card.find(({ text }) => text.length > NAME_CHARS_MAX || /[\p{Cc}{}'"]/u.test(text))
  if (odd) return bad(odd, oddity(odd.text))
  const [name, ...words] = card
  if (name.text.length < 2) return bad(name, `${name.text} needs a name after its letter, such as ${name.text}1.`)
  const letter = name.text[0]!.toLowerCase()
  if (letter === 'r' || letter === 'c' || letter === 'l') return readPassive(name, words, letter)
  if (letter === 'e') return readControlled(name, words)
  if (letter === 'v') return readSource(name, words)
  if (letter === 'x') return readInstance(name, words)
  return bad(name, `${shown(name.text)} is no card that is read here; R, C, L, V, E and X are.`)
}

const bad = (word: Word, detail: string): CardReading => ({ ok: false, problem: problemAt(word, detail) })
const formed = (word: Word, form: string) => bad(word, `${shown(word.text)} is written as “${form}”.`)
const oddity = (text: string) =>
  text.length > NAME_CHARS_MAX
    ? `A word of a card has at most ${NAME_CHARS_MAX} characters; this one has ${text.length}.`
    : `Expressions in braces or quotes are not read; write the number itself.`

function readPassive(name: Word, words: Word[], letter: keyof typeof PASSIVES): CardReading {
  const { passive, form, value: quantity } = PASSIVES[letter]
  const [a, b, ...rest] = words
  const labelled = rest[1]?.text === '=' && rest[0]!.text.toLowerCase() === letter
  const [typed, ...parameters] = labelled ? rest.slice(2) : rest
  if (!a || !b || !typed) return formed(name, form)
  const value = spiceNumber(typed.text)
  if (value === null) return bad(typed, `${shown(typed.text)} is no ${quantity}; ${form} has one.`)
  if (value < 0) return bad(typed, `${shown(name.text)} is ${value}; it takes a value from zero up.`)
  let noisy = true
  for (let k = 0; k < parameters.length; k += 3) {
    const [key, equals, set] = parameters.slice(k, k + 3)
    const number = equals?.text === '=' && set ? spiceNumber(set.text) : null
    const word = key!.text.toLowerCase()
    if (number === null) return bad(key!, `${shown(key!.text)} is left over; the card is written as “${form}”.`)
    if (letter === 'r' && word === 'noisy') noisy = number !== 0
    else if (letter === 'r' || word !== 'ic' || number !== 0)
      return bad(key!, `The parameter ${shown(key!.text)} is not read${letter === 'r' ? '; noisy=0 is' : ''}.`)
  }
  return { ok: true, card: { kind: 'passive', name, passive, nodes: [a, b], value, noisy } }
}

function readControlled(name: Word, words: Word[]): CardReading {
  const fields = words[2]?.text.toLowerCase() === 'vcvs' && words.length > 5 ? words.filter((_, k) => k !== 2) : words
  const [, , , , typed, extra] = fields
  if (!typed) return formed(name, CONTROLLED_FORM)
  if (extra) return bad(extra, `${shown(extra.text)} is left over; the card is written as “${CONTROLLED_FORM}”.`)
  const gain = spiceNumber(typed.text)
  if (gain === null) return bad(typed, `${shown(typed.text)} is no gain; “${CONTROLLED_FORM}” has one.`)
  return { ok: true, card: { kind: 'controlled', name, nodes: fields.slice(0, 4), gain } }
}

function readSource(name: Word, words: Word[]): CardReading {
  const [plus, minus, ...rest] = words
  if (!plus || !minus) return formed(name, SOURCE_FORM)
  const card = { kind: 'source' as const, name, nodes: [plus, minus], dcVolt: 0, acVolt: 0, acPhaseRad: 0 }
  let k = 0
  const number = () => {
    const value = rest[k] ? spiceNumber(rest[k]!.text) : null
    if (value !== null) k++
    return value
  }
  while (k < rest.length) {
    const word = rest[k]!
    const key = word.text.toLowerCase()
    const level = number()
    if (level !== null && k === 1) card.dcVolt = level
    else if (level !== null)
      return bad(word, `${shown(word.text)} is left over; the card is written as “${SOURCE_FORM}”.`)
    else if (key === 'dc') {
      k++
      const volt = number()
      if (volt === null) return bad(word, 'DC is followed by a voltage.')
      card.dcVolt = volt
    } else if (key === 'ac') {
      k++
      card.acVolt = number() ?? 1
      card.acPhaseRad = ((number() ?? 0) * Math.PI) / 180
    } else if (SHAPES.has(key)) {
      k++
      while (number() !== null);
    } else return bad(word, `${shown(word.text)} is not read; the card is written as “${SOURCE_FORM}”.`)
  }
  return { ok: true, card }
}

function readInstance(name: Word, words: Word[]): CardReading {
  const equals = words.find(({ text }) => text === '=')
  if (equals) return bad(equals, 'Parameters of a subcircuit are not read; write its values as numbers.')
  const of = words.at(-1)
  if (!of || words.length < 2) return formed(name, INSTANCE_FORM)
  return { ok: true, card: { kind: 'instance', name, nodes: words.slice(0, -1), of } }
}
