import type { Problem, Reading } from '../../problems'
import type { Circuit, GridPoint, SourceSpan } from '../part'
import { forEachRunPoint } from '../grammar/check-circuit'
import { pointsOf } from '../points'
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
      const rival = elements.find((element) => element.kind === 'opamp' && element.out === out)
      if (rival) complain(part.span, `The outputs of ${rival.ref} and ${part.ref} are joined.`)
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
  ]
  const all = new Set([GROUND, ...elements.flatMap(nodesOf), ...ports.flatMap((port) => [port.plus, port.minus])])
  ports.forEach((port, k) => {
    const { span, role } = circuit.ports[k]!
    if (port.plus === port.minus)
      complain(span, `The ${role} ${port.name} is joined to ${port.minus === GROUND ? 'ground' : 'itself'}.`)
    const twin = role === 'input' && ports.find((one, j) => j < k && one.role === role && one.plus === port.plus)
    if (twin) complain(span, `The inputs ${twin.name} and ${port.name} are joined.`)
  })
  const grounded = [...circuit.grounds, ...circuit.references, ...circuit.supplies].length > 0
  // An op-amp's output is a voltage against ground, so that a follower needs no ground symbol.
  if (!grounded && !elements.some((element) => element.kind === 'opamp'))
    complain({ line: 1, column: 1, endColumn: 1 }, 'Nothing is joined to ground or to a reference.')
  if (problems.length) {
    problems.sort((a, b) => a.line! - b.line! || a.column! - b.column!)
    return { ok: false, problems: problems as [Problem, ...Problem[]] }
  }
  const plain = ({ name, plus, minus }: NetPort): NetPort => ({ name, plus, minus })
  return {
    ok: true,
    value: {
      nodes: [...all],
      elements,
      inputs: ports.filter((port) => port.role === 'input').map(plain),
      outputs: ports.filter((port) => port.role === 'output').map(plain),
      signalGrounds: signalGrounds.filter((node) => node !== GROUND && all.has(node)),
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
    // Corners and ends join; what a run merely crosses does not.
    const joints = new Set(pointsOf(circuit).map(({ point }) => key(point)))
    for (const wire of circuit.wires)
      forEachRunPoint(wire.points, (point, from) => {
        if (joints.has(key(point))) this.join(point, from)
      })
    const given = [...circuit.ports, ...circuit.names, ...circuit.references, ...circuit.supplies].map(
      (one) => one.name,
    )
    for (const name of given) this.used.add(name)
  }

  private root(point: string): string {
    let at = point
    while (this.parent.has(at)) {
      const above = this.parent.get(at)!
      const further = this.parent.get(above)
      // Halving the path as it is walked keeps long wires from making long walks.
      if (further !== undefined) this.parent.set(at, further)
      at = above
    }
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
