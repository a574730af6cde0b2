import type { Amplifiers } from '../analysis/op-amp/amplifier'
import { amplifierOf, requireAmplifiers } from '../analysis/op-amp/amplifier'
import type { ElementValues, NetPort, Netlist } from '../circuit/netlist/netlist'
import { GROUND } from '../circuit/netlist/netlist'
import type { Problem } from '../problems'
import { ProblemError } from '../problems'
import { amplifierCards } from './amplifier-cards'
import { commentText, SafeNames } from './names'

/** What is written besides the circuit. */
export interface DeckOptions {
  /** First line of the deck. */
  title?: string | undefined
  /** Input that is driven by 1 V; the others are held at 0 V. The first by default. */
  input?: string | undefined
  /** Real op-amps by designator, the others ideal. */
  amplifiers?: Amplifiers | undefined
  /** Resistors that make no noise. */
  noiseless?: readonly string[] | undefined
  /** Sweep, Hz, and points a decade; no analysis is written when left out. */
  sweep?: { fromHz: number; toHz: number; perDecade: number } | undefined
}

const LETTERS = { resistor: 'R', capacitor: 'C', inductor: 'L' } as const

/**
 * A deck that a general-purpose simulator runs as it stands: title, sources, parts, op-amps, `.ac` with the outputs
 * printed, `.end`. Names are spelled in letters, digits and _, the others said in a comment,
 * so that no name can be read as anything else. A short is a source of 0 V; an open resistor is left out.
 * @throws {ProblemError} 'part-missing', 'value-out-of-range' naming every part; 'output-unknown' for an unknown input
 */
export function writeDeck(netlist: Netlist, values: ElementValues, options: DeckOptions = {}): string {
  const { amplifiers = {}, sweep } = options
  requireValues(netlist, values)
  requireAmplifiers(amplifiers, netlist.elements)
  const nodes = new SafeNames(['0', 'gnd'])
  const refs = new SafeNames()
  const node = (name: string) => (name === GROUND ? GROUND : nodes.of(name))
  // Names of the circuit come first, so that the model's own give way to them.
  for (const name of netlist.nodes) node(name)
  const named = new Map(
    netlist.elements.map(({ kind, ref }) => [ref, kind === 'opamp' ? ref : refs.of(ref, LETTERS[kind])]),
  )
  const cards: string[] = sources(netlist, options.input, node, refs)
  const resistors = new Set(netlist.elements.flatMap(({ kind, ref }) => (kind === 'resistor' ? [ref] : [])))
  const quiet = new Set(options.noiseless?.filter((ref) => resistors.has(ref)))
  for (const element of netlist.elements) {
    if (element.kind === 'opamp') {
      const place = { plus: node(element.plus), minus: node(element.minus), out: node(element.out) }
      const ref = element.ref.replace(/[^A-Za-z0-9_]+/g, '_').slice(0, 32)
      cards.push(...amplifierCards({ ref, ...place }, amplifierOf(amplifiers, element), nodes, refs))
      continue
    }
    const value = values[element.ref]!
    const ref = named.get(element.ref)!
    // Simulators put some small resistance for a resistor of 0.
    if (value === 0 && element.kind !== 'capacitor')
      cards.push(`${refs.free(`V${ref}`)} ${node(element.a)} ${node(element.b)} 0`)
    else if (value < Infinity)
      cards.push(`${ref} ${node(element.a)} ${node(element.b)} ${value}${quiet.has(element.ref) ? ' noisy=0' : ''}`)
  }
  for (const { ref, a, b, plus, minus, gain } of netlist.controlled ?? [])
    cards.push(`${refs.of(ref, 'E')} ${node(a)} ${node(b)} ${node(plus)} ${node(minus)} ${gain}`)
  netlist.signalGrounds.forEach((held, k) => cards.push(`${refs.free(`Vground${k + 1}`)} ${node(held)} 0 0`))
  const renamed = netlist.nodes.flatMap((name) =>
    node(name) === name ? [] : [`* node ${node(name)}: ${commentText(name)}`],
  )
  const lines = [
    `* ${commentText(options.title ?? '')}`.trimEnd(),
    ...renamed,
    ...cards,
    ...analysis(netlist, node, sweep),
  ]
  return `${[...lines, '.end'].join('\n')}\n`
}

function sources(
  { inputs, signalGrounds }: Netlist,
  driven: string | undefined,
  node: (name: string) => string,
  refs: SafeNames,
): string[] {
  const live = driven === undefined ? inputs[0] : inputs.find(({ name }) => name === driven)
  if (driven !== undefined && !live)
    throw new ProblemError('output-unknown', `No input is called ${commentText(driven)}.`)
  const grounds = new Set([GROUND, ...signalGrounds])
  const source = (name: string, at: string, volt: number) =>
    `${refs.of(name, 'V')} ${node(at)} 0 DC 0 AC ${Math.abs(volt)} ${volt < 0 ? 180 : 0}`
  return inputs.flatMap((port: NetPort) => {
    const { name, plus, minus } = port
    const volt = port === live ? 1 : 0
    if (grounds.has(minus)) return grounds.has(plus) ? [] : [source(name, plus, volt)]
    if (grounds.has(plus)) return [source(name, minus, -volt)]
    return [source(`${name}+`, plus, volt / 2), source(`${name}-`, minus, -volt / 2)]
  })
}

function analysis({ outputs }: Netlist, node: (name: string) => string, sweep: DeckOptions['sweep']): string[] {
  if (!sweep) return []
  const of = ({ plus, minus }: NetPort) => (minus === GROUND ? node(plus) : `${node(plus)},${node(minus)}`)
  const printed = outputs.filter(({ plus }) => plus !== GROUND).map((port) => ` v(${of(port)})`)
  return [
    `.ac dec ${sweep.perDecade} ${sweep.fromHz} ${sweep.toHz}`,
    ...(printed.length ? [`.print ac${printed.join('')}`] : []),
  ]
}

function requireValues({ elements }: Netlist, values: ElementValues): void {
  const problems = elements.flatMap(({ kind, ref }): Problem[] => {
    if (kind === 'opamp') return []
    const pointer = `#/values/${ref}`
    if (!Object.hasOwn(values, ref)) return [{ code: 'part-missing', detail: `${ref} has no value.`, pointer }]
    const value = values[ref]!
    if (value >= 0 && (Number.isFinite(value) || kind === 'resistor')) return []
    return [{ code: 'value-out-of-range', detail: `${ref} is ${value}; it takes a value from zero up.`, pointer }]
  })
  const [first, ...more] = problems
  if (first) throw new ProblemError(first.code, first.detail, { pointer: first.pointer! }, more)
}
