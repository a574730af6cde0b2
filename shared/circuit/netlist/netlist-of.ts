import type { Problem, Reading } from '../../problems'
import type { Circuit, GridPoint, SourceSpan } from '../part'
import { onRun } from '../grammar/statement'
import type { NetElement, Netlist, NetPort } from './netlist'
import { GROUND } from './netlist'

/**
 * Finds what is connected: pins, wire corners and wire ends that lie on another wire's run are joined; wires that only
 * cross are not.
 * @returns the netlist, or problems with line and column
 */
export function netlistOf(circuit: Circuit): Reading<Netlist> {
  const nodes = new Connectivity(circuit)
  const problems: Problem[] = []
  const complain = (span: SourceSpan, detail: string) =>
    problems.push({ code: 'circuit-not-read', detail, line: span.line, column: span.column })

  for (const one of circuit.grounds) nodes.name(one.at, GROUND)
  for (const list of [circuit.references, circuit.supplies, circuit.names])
    for (const one of list) {
      const former = nodes.name(one.at, one.name)
      if (former && former !== one.name)
        complain(one.span, `${one.name} is joined to ${former === GROUND ? 'ground' : former}.`)
    }
  const ports = circuit.ports.map((port): { role: string } & NetPort => ({
    role: port.role,
    name: port.name,
    plus: nodes.nameIfNone(port.plus, port.minus ? `${port.name}+` : port.name),
    minus: port.minus ? nodes.nameIfNone(port.minus, `${port.name}-`) : GROUND,
  }))
  const elements: NetElement[] = []
  for (const part of circuit.parts) if (part.kind === 'opamp') nodes.prefer(part.minus, 'n', part.plus, 'p')
  for (const part of circuit.parts) {
    if (part.kind === 'opamp') {
      const [plus, minus, out] = [part.plus, part.minus, part.out].map((p) => nodes.nodeAt(p)) as [
        string,
        string,
        string,
      ]
      if (out === GROUND) complain(part.span, `The output of ${part.ref} is joined to ground.`)
      if (plus === minus) complain(part.span, `Both inputs of ${part.ref} are joined.`)
      elements.push({ kind: 'opamp', ref: part.ref, plus, minus, out })
      continue
    }
    const [a, b] = part.pins.map((p) => nodes.nodeAt(p)) as [string, string]
    if (a === b) complain(part.span, `Both pins of ${part.ref} are joined; it does nothing.`)
    elements.push({ kind: part.kind, ref: part.ref, a, b })
  }
  const held = new Map<string, string>()
  for (const one of circuit.references) if (one.through) held.set(nodes.nodeAt(one.at), one.through)
  for (const [node, ref] of held)
    if (!elements.some((element) => element.ref === ref)) elements.push({ kind: 'resistor', ref, a: node, b: GROUND })
  const signalGrounds = [
    ...new Set(
      [...circuit.references.filter((one) => !one.through), ...circuit.supplies].map((one) => nodes.nodeAt(one.at)),
    ),
  ].filter((node) => node !== GROUND)
  const all = new Set([GROUND, ...elements.flatMap(nodesOf), ...ports.flatMap((port) => [port.plus, port.minus])])
  if (circuit.grounds.length === 0 && signalGrounds.length === 0)
    complain({ line: 1, column: 1, endColumn: 1 }, 'Nothing is joined to ground or to a reference.')
  if (problems.length) return { ok: false, problems: problems as [Problem, ...Problem[]] }
  const plain = ({ name, plus, minus }: NetPort): NetPort => ({ name, plus, minus })
  return {
    ok: true,
    value: {
      nodes: [...all],
      elements,
      inputs: ports.filter((port) => port.role === 'input').map(plain),
      outputs: ports.filter((port) => port.role === 'output').map(plain),
      signalGrounds,
    },
  }
}

const nodesOf = (element: NetElement) =>
  element.kind === 'opamp' ? [element.plus, element.minus, element.out] : [element.a, element.b]

const key = (p: GridPoint) => `${p.x},${p.y}`

/** Joined grid points as sets, each with a name. */
class Connectivity {
  private readonly parent = new Map<string, string>()
  private readonly names = new Map<string, string>()
  private readonly used = new Set<string>([GROUND])
  private letters = 0

  constructor(circuit: Circuit) {
    const points = new Map<string, GridPoint>()
    const add = (p: GridPoint) => points.set(key(p), p)
    for (const part of circuit.parts) {
      if (part.kind === 'opamp') [part.minus, part.plus, part.out, ...(part.supply ?? [])].forEach(add)
      else part.pins.forEach(add)
    }
    for (const port of circuit.ports) [port.plus, ...(port.minus ? [port.minus] : [])].forEach(add)
    for (const one of [...circuit.grounds, ...circuit.references, ...circuit.supplies, ...circuit.names]) add(one.at)
    // Corners and ends join; what a run merely crosses does not.
    for (const wire of circuit.wires) wire.points.forEach(add)
    for (const wire of circuit.wires)
      for (let k = 1; k < wire.points.length; k++) {
        const [a, b] = [wire.points[k - 1]!, wire.points[k]!]
        for (const p of points.values()) if (onRun(p, a, b)) this.join(p, a)
        this.join(a, b)
      }
    const given = [...circuit.ports, ...circuit.names, ...circuit.references, ...circuit.supplies].map(
      (one) => one.name,
    )
    for (const name of given) this.used.add(name)
  }

  private root(point: string): string {
    let at = point
    while (this.parent.has(at)) at = this.parent.get(at)!
    return at
  }

  private join(a: GridPoint, b: GridPoint) {
    const [x, y] = [this.root(key(a)), this.root(key(b))]
    if (x !== y) this.parent.set(x, y)
  }

  /** Names the node at a point; gives the name that it had already. Points far apart with one name are one node. */
  name(at: GridPoint, name: string): string | undefined {
    const root = this.root(key(at))
    const former = this.names.get(root)
    if (former === undefined) this.names.set(root, name)
    return former
  }

  nameIfNone(at: GridPoint, name: string): string {
    const root = this.root(key(at))
    const former = this.names.get(root)
    if (former === undefined) this.names.set(root, name)
    return former ?? name
  }

  /** The trade's letters for the inputs of an op-amp, with a digit when there are several. */
  prefer(minus: GridPoint, n: string, plus: GridPoint, p: string) {
    for (const [at, letter] of [
      [minus, n],
      [plus, p],
    ] as const)
      if (!this.names.has(this.root(key(at)))) this.names.set(this.root(key(at)), this.unused(letter))
  }

  private unused(letter: string): string {
    let name = letter
    for (let k = 2; this.used.has(name); k++) name = `${letter}${k}`
    this.used.add(name)
    return name
  }

  nodeAt(at: GridPoint): string {
    const root = this.root(key(at))
    const name = this.names.get(root)
    if (name !== undefined) return name
    let made: string
    do made = LETTERS[this.letters % 26]! + (this.letters >= 26 ? String(Math.floor(this.letters / 26)) : '')
    while (this.used.has(made) && ++this.letters)
    this.used.add(made)
    this.names.set(root, made)
    return made
  }
}

const LETTERS = 'abcdefghijklmoqrstuvwxyznp'
