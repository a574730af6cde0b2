import type { Problem } from '../problems'
import type { ReadCard } from './card'
import { problemAt, readCard, shown } from './card'
import type { Card, Scanned, Word } from './scan'

/** A .subckt with its cards, or the deck itself. */
export interface Subcircuit {
  name: string
  pins: Word[]
  cards: ReadCard[]
  inner: Map<string, Subcircuit>
  outer: Subcircuit | null
}

/** Lines that say what a simulator is to compute or print; nothing of the circuit is lost without them. */
const LEFT_OUT = new Set(
  '.ac .dc .op .tran .noise .tf .pz .print .plot .probe .save .option .options .width .title'.split(' '),
)

/**
 * Sorts the cards of a deck into its subcircuits, each card read once however often it is used.
 * @param complain takes each problem; false when no more are wanted
 */
export function readSubcircuits(scanned: Scanned, complain: (problem: Problem) => boolean): Subcircuit {
  const root = empty('', [], null)
  let open = root
  let head: Word | null = null
  let script = false
  const take = (card: Card) => {
    const reading = readCard(card)
    if (reading.ok) open.cards.push(reading.card)
    return reading.ok || complain(reading.problem)
  }
  const control = (card: Card, [word, named, ...pins] = card): boolean => {
    const key = word.text.toLowerCase()
    if (key === '.subckt') {
      const wrong = pins.find(({ text }) => text === '=' || /^(params:|[{}'"])/i.test(text))
      if (!named || wrong)
        return complain(problemAt(wrong ?? word, 'A subcircuit begins with “.subckt NAME node node”.'))
      const name = named.text.toLowerCase()
      if (open.inner.has(name)) complain(problemAt(named, `The subcircuit ${shown(named.text)} is there already.`))
      const made = empty(named.text, pins, open)
      open.inner.set(name, made)
      open = made
      head ??= word
      return true
    }
    if (key === '.ends') {
      if (!open.outer) return complain(problemAt(word, 'This .ends has no .subckt before it.'))
      open = open.outer
      if (!open.outer) head = null
      return true
    }
    if (LEFT_OUT.has(key)) return true
    script = key === '.control'
    return complain(problemAt(word, `${shown(word.text)} is not read; a deck here has cards and .subckt alone.`))
  }
  if (scanned.stray)
    complain(problemAt(scanned.stray, 'A line that begins with + continues a card; there is none before it.'))
  for (const card of scanned.cards) {
    if (script) {
      script = card[0].text.toLowerCase() !== '.endc'
      continue
    }
    if (!(card[0].text.startsWith('.') ? control(card) : take(card))) return root
  }
  if (head) complain(problemAt(head, 'This .subckt has no .ends.'))
  return root
}

const empty = (name: string, pins: Word[], outer: Subcircuit | null): Subcircuit => ({
  name,
  pins,
  cards: [],
  inner: new Map(),
  outer,
})

/** The subcircuit that a name means where it is used: the nearest one outwards. */
export function subcircuitNamed(from: Subcircuit, name: string): Subcircuit | undefined {
  for (let scope: Subcircuit | null = from; scope; scope = scope.outer) {
    const found = scope.inner.get(name.toLowerCase())
    if (found) return found
  }
  return undefined
}
