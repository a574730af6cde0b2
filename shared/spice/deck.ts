import type { ControlledSource, ElementValues, NetElement, Netlist, NetPort } from '../circuit/netlist/netlist'
import { GROUND } from '../circuit/netlist/netlist'
import { ProblemError } from '../problems'

/** A V card: v(plus) − v(minus). */
export interface DeckSource {
  ref: string
  plus: string
  minus: string
  dcVolt: number
  /** Magnitude of its AC part, volt; 0 when it has none. */
  acVolt: number
  /** Phase of its AC part, rad. */
  acPhaseRad: number
}

/** What SPICE cards say, subcircuits resolved. What is inside X1 is called X1.R1, X1.a. */
export interface Deck {
  elements: NetElement[]
  values: ElementValues
  controlled: ControlledSource[]
  sources: DeckSource[]
  /** Resistors with `noisy=0`. */
  noiseless: string[]
  /** Spelling of each node as first written, by its lower-case name. */
  nodes: ReadonlyMap<string, string>
  /** Designator of the op-amp that a name means, by lower-case name: U1, its card EU1, or the X that holds only it. */
  opamps: ReadonlyMap<string, string>
}

/** What of a deck is driven and read. */
export interface DeckPorts {
  /** Node driven by 1 V against ground, all sources of the deck at 0 V; the deck's own sources when left out. */
  input?: string | undefined
  /** Designator of the one source that is left on, at 1 V. */
  source?: string | undefined
  /** A node, or plus and minus. */
  output: string | readonly [plus: string, minus: string]
}

/** Name of the output port of a deck's netlist. */
export const DECK_OUTPUT = 'out'
/** Node that stands for what several sources have in common; the space keeps it apart from the deck's own. */
const COMMON = ' sources'

/** A node of the deck in its own spelling, whatever the case of the name; undefined when it has none such. */
export const deckNode = (deck: Deck, name: string): string | undefined =>
  isGround(name) ? GROUND : deck.nodes.get(name.toLowerCase())

/** Ground's names in every SPICE, in lower or upper case. */
export const isGround = (node: string) => node === GROUND || node.toLowerCase() === 'gnd'

/** Sources with an AC part. */
export const liveSources = (deck: Deck): DeckSource[] => deck.sources.filter(({ acVolt }) => acVolt !== 0)

/**
 * The netlist of a deck with one input port and one output port `out`, as every analysis takes it. Several sources, or a
 * source of another size than 1 V, between any two nodes, follow one common drive of 1 V in proportion.
 * @throws {ProblemError} 'output-unknown' for a node that the deck doesn't have; 'circuit-singular' when nothing drives
 *   it, or when sources differ in phase by other than half a turn, so that no real H(s) follows from them together
 */
export function netlistOfDeck(deck: Deck, ports: DeckPorts): Netlist {
  const pair = typeof ports.output === 'string' ? [ports.output, GROUND] : ports.output
  const [plus, minus] = pair.map((name) => knownNode(deck, name)) as [string, string]
  const live = ports.source === undefined ? liveSources(deck) : deck.sources.filter(({ ref }) => ref === ports.source)
  const netlist: Netlist = {
    nodes: [...new Set([GROUND, ...deck.nodes.values()])],
    elements: deck.elements,
    inputs: [],
    outputs: [{ name: DECK_OUTPUT, plus, minus }],
    signalGrounds: [],
    controlled: [...deck.controlled],
  }
  const input = ports.input === undefined ? undefined : knownNode(deck, ports.input)
  if (input !== undefined) netlist.inputs.push({ name: input, plus: input, minus: GROUND })
  else if (live.length === 0)
    throw new ProblemError(
      'circuit-singular',
      'No source has an AC part; write one as `Vin in 0 AC 1`, or name an input.',
    )
  const alone = live.length === 1 && live[0]!
  const unit = ports.source !== undefined || (alone && alone.acVolt === 1 && alone.acPhaseRad === 0)
  for (const source of deck.sources) {
    const port = { name: source.ref, plus: source.plus, minus: source.minus }
    const on = input === undefined && live.includes(source)
    if (!on && isOf(input, source)) continue
    if (on && alone && unit && isGrounded(source)) netlist.inputs.push(port)
    else if (on) follow(netlist, port, unit ? 1 : realVolt(source))
    else hold(netlist, port)
  }
  return netlist
}

const isGrounded = ({ plus, minus }: { plus: string; minus: string }) => (plus === GROUND) !== (minus === GROUND)
const isOf = (node: string | undefined, source: DeckSource) =>
  isGrounded(source) && (source.plus === node || source.minus === node)

function knownNode(deck: Deck, name: string): string {
  const node = deckNode(deck, name)
  if (node !== undefined) return node
  const known = [...deck.nodes.values()].slice(0, 20).join(', ')
  throw new ProblemError('output-unknown', `No node is called ${name}; the deck has ${known || 'none'}.`)
}

function realVolt({ ref, acVolt, acPhaseRad }: DeckSource): number {
  const [re, im] = [acVolt * Math.cos(acPhaseRad), acVolt * Math.sin(acPhaseRad)]
  if (Math.abs(im) <= 1e-12 * Math.abs(re)) return re
  throw new ProblemError(
    'circuit-singular',
    `${ref} has a phase of its own; an H(s) of the sources together takes 0 or 180 degrees. Name one input instead.`,
  )
}

/** A source that is some part of the common drive. */
function follow(netlist: Netlist, { name, plus, minus }: NetPort, gain: number): void {
  if (netlist.inputs.length === 0) {
    netlist.inputs.push({ name: COMMON.trim(), plus: COMMON, minus: GROUND })
    netlist.nodes.push(COMMON)
  }
  netlist.controlled?.push({ ref: name, a: plus, b: minus, plus: COMMON, minus: GROUND, gain })
}

/** A source at 0 V. */
function hold(netlist: Netlist, port: NetPort): void {
  const { name, plus, minus } = port
  if (isGrounded(port)) netlist.signalGrounds.push(plus === GROUND ? minus : plus)
  else netlist.controlled?.push({ ref: name, a: plus, b: minus, plus: GROUND, minus: GROUND, gain: 0 })
}
