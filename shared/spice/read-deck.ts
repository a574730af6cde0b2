import { GROUND } from '../circuit/netlist/netlist'
import type { Problem, Reading } from '../problems'
import { unread } from '../problems'
import type { ReadCard } from './card'
import { problemAt, readCard, shown } from './card'
import type { Deck } from './deck'
import { isGround } from './deck'
import type { Scanned, Word } from './scan'
import { DECK_WORDS_MAX, scanDeck } from './scan'
import type { Subcircuit } from './subcircuits'
import { readSubcircuits, subcircuitNamed } from './subcircuits'

export const DECK_CHARS_MAX = 200_000
/** Cards after all subcircuits are put in. */
export const DECK_CARDS_MAX = 2_000
/** Subcircuits within one another. */
export const DECK_DEPTH_MAX = 20
const PROBLEMS_MAX = 50
/** A controlled source of this gain or more counts as an ideal op-amp. */
export const IDEAL_GAIN = 1e9

/**
 * Reads SPICE cards: R, C, L, V, E and X with nested .subckt, in either case, with comments, continuation lines and
 * scaled values. A first line that reads as a card is one, else it is the title. Lines that only ask for an analysis or
 * a print are left out; any other control line is refused. An E card of gain 1e9 or more, its output against ground, is
 * an ideal op-amp: EU1 is U1, E1 stays E1.
 * @returns the deck, or every problem with line and column
 * @example readDeck('* divider\nVin in 0 AC 1\nR1 in out 1k\nC1 out 0 10n') // { ok: true, value: { elements: […], … } }
 * Source of the card forms: L. W. Nagel, SPICE2, Memorandum ERL-M520, University of California (1975), appendix 1.
 */
export function readDeck(text: string): Reading<Deck> {
  if (text.length > DECK_CHARS_MAX)
    return unread('circuit-not-read', `A deck has at most ${DECK_CHARS_MAX} characters; this one has ${text.length}.`)
  const problems: Problem[] = []
  const complain = (problem: Problem) => problems.push(problem) < PROBLEMS_MAX
  const scanned = scanDeck(text)
  if (scanned.beyond)
    return { ok: false, problems: [problemAt(scanned.beyond, `A deck has at most ${DECK_WORDS_MAX} words.`)] }
  const root = readSubcircuits(withoutTitle(scanned), complain)
  const flattening = new Flattening(complain)
  if (problems.length === 0) flattening.put(root, '', new Map(), 0)
  const { elements, sources, controlled } = flattening.deck
  if (problems.length === 0 && elements.length + sources.length + controlled.length === 0)
    problems.push({ code: 'circuit-not-read', detail: 'The deck has no cards.', line: 1, column: 1 })
  const [first, ...more] = problems
  return first ? { ok: false, problems: [first, ...more] } : { ok: true, value: flattening.deck }
}

function withoutTitle(scanned: Scanned): Scanned {
  const { first, cards } = scanned
  if (!first) return scanned
  const [{ text }] = first
  const reading = readCard(first)
  const defines = (name: string) =>
    cards.some(([head, named]) => head.text.toLowerCase() === '.subckt' && named?.text.toLowerCase() === name)
  const isCard = text.startsWith('.')
    ? text.toLowerCase() !== '.title'
    : reading.ok && (reading.card.kind !== 'instance' || defines(reading.card.of.text.toLowerCase()))
  return isCard ? { ...scanned, cards: [first, ...cards] } : scanned
}

/** Puts subcircuits in place of the cards that call for them. */
class Flattening {
  private readonly nodeNames = new Map<string, string>()
  private readonly opampNames = new Map<string, string>()
  private readonly taken = new Set<string>()
  private readonly within: Subcircuit[] = []
  private count = 0
  private full = false
  readonly deck: Deck = {
    elements: [],
    values: {},
    controlled: [],
    sources: [],
    noiseless: [],
    nodes: this.nodeNames,
    opamps: this.opampNames,
  }

  constructor(private readonly complain: (problem: Problem) => boolean) {}

  put(circuit: Subcircuit, prefix: string, pins: ReadonlyMap<string, string>, depth: number): void {
    this.within.push(circuit)
    const local = (word: Word) => this.node(word.text, prefix, pins)
    for (const card of circuit.cards) {
      if (this.full) break
      if (++this.count > DECK_CARDS_MAX) {
        this.stop(card.name, `A deck has at most ${DECK_CARDS_MAX} cards with all subcircuits put in.`)
        break
      }
      const ref = prefix + card.name.text
      if (this.taken.has(ref.toLowerCase())) this.fail(card.name, `${shown(card.name.text)} is there already.`)
      this.taken.add(ref.toLowerCase())
      if (card.kind === 'instance') this.call(card, circuit, ref, local, depth)
      else this.place(card, ref, prefix, card.nodes.map(local))
    }
    this.within.pop()
  }

  private call(
    card: ReadCard & { kind: 'instance' },
    from: Subcircuit,
    ref: string,
    local: (word: Word) => string,
    depth: number,
  ): void {
    const circuit = subcircuitNamed(from, card.of.text)
    if (!circuit) return this.fail(card.of, `No subcircuit is called ${shown(card.of.text)}.`)
    if (this.within.includes(circuit)) return this.stop(card.of, `${shown(circuit.name)} holds itself.`)
    if (depth >= DECK_DEPTH_MAX)
      return this.stop(card.of, `Subcircuits lie within one another at most ${DECK_DEPTH_MAX} deep.`)
    const [has, needs] = [card.nodes.length, circuit.pins.length]
    if (has !== needs)
      return this.fail(card.name, `${shown(card.name.text)} has ${has} nodes; ${shown(circuit.name)} has ${needs}.`)
    const before = this.deck.elements.length
    const pins = new Map(circuit.pins.map(({ text }, k) => [text.toLowerCase(), local(card.nodes[k]!)]))
    this.put(circuit, `${ref}.`, pins, depth + 1)
    const opamps = this.deck.elements.slice(before).filter(({ kind }) => kind === 'opamp')
    if (opamps.length === 1) this.nameOpamp(opamps[0]!.ref, ref)
  }

  private place(card: Exclude<ReadCard, { kind: 'instance' }>, ref: string, prefix: string, nodes: string[]): void {
    const { elements, controlled, sources, noiseless } = this.deck
    const [a, b, plus, minus] = nodes as [string, string, string, string]
    if (card.kind === 'source') {
      const { dcVolt, acVolt, acPhaseRad } = card
      sources.push({ ref, plus: a, minus: b, dcVolt, acVolt, acPhaseRad })
    } else if (card.kind === 'passive') {
      elements.push({ kind: card.passive, ref, a, b })
      ;(this.deck.values as Record<string, number>)[ref] = card.value
      if (!card.noisy) noiseless.push(ref)
    } else if (Math.abs(card.gain) >= IDEAL_GAIN && (a === GROUND) !== (b === GROUND)) {
      const opamp = /^eu/i.test(card.name.text) ? prefix + card.name.text.slice(1) : ref
      const turned = card.gain < 0 !== (a === GROUND)
      const inputs = turned ? { plus: minus, minus: plus } : { plus, minus }
      elements.push({ kind: 'opamp', ref: opamp, ...inputs, out: a === GROUND ? b : a })
      this.nameOpamp(opamp, opamp)
      this.nameOpamp(opamp, ref)
    } else controlled.push({ ref, a, b, plus, minus, gain: card.gain })
  }

  /** XU1 is also called U1, where nothing else is. */
  private nameOpamp(opamp: string, name: string): void {
    const key = name.toLowerCase()
    this.opampNames.set(key, opamp)
    if (key.startsWith('xu') && !key.includes('.') && !this.opampNames.has(key.slice(1)))
      this.opampNames.set(key.slice(1), opamp)
  }

  private node(name: string, prefix: string, pins: ReadonlyMap<string, string>): string {
    if (isGround(name)) return GROUND
    const pin = pins.get(name.toLowerCase())
    if (pin !== undefined) return pin
    const full = prefix + name
    const known = this.nodeNames.get(full.toLowerCase())
    if (known === undefined) this.nodeNames.set(full.toLowerCase(), full)
    return known ?? full
  }

  private fail(word: Word, detail: string): void {
    if (!this.complain(problemAt(word, detail))) this.full = true
  }

  private stop(word: Word, detail: string): void {
    this.fail(word, detail)
    this.full = true
  }
}
