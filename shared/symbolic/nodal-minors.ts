import { portOf } from '../analysis/nodal-analysis'
import type { ControlledSource, NetPort, Netlist, PassiveElement } from '../circuit/netlist/netlist'
import { GROUND } from '../circuit/netlist/netlist'
import { ProblemError } from '../problems'

export const PARTS_MAX = 30
/** Terms of one determinant; three op-amps and ten passive parts have at most 252. */
export const TERMS_MAX = 2000
/** Products of terms in one expansion. */
const WORK_MAX = 2_000_000
const NODES_MAX = 24

/** A sum of products of different admittances and gains: coefficient by the set of elements, one bit each. */
export type AdmittanceSum = ReadonlyMap<number, number>

/** H as a quotient of sums of products of admittances. */
export interface AdmittanceRatio {
  passive: PassiveElement[]
  numerator: AdmittanceSum
  denominator: AdmittanceSum
  /** Sources of finite gain; their gains have the bits after those of the passive elements. */
  sources: readonly ControlledSource[]
  /** Nodes at which Kirchhoff's current law is written; those that a source joins in one. */
  nodes: string[][]
}

/** What a node's voltage is: so many times half the source's, or an unknown by index. */
type Voltage = { known: number } | { column: number }

/**
 * H of a circuit by Cramer's rule on its nodal admittance matrix. A nullator makes two voltages one column, a norator
 * takes away the current law of its node. Minors are expanded along rows, each once for a set of columns. By Cauchy and
 * Binet every minor has each admittance to the first power at most, so that products with a square cancel and are left
 * out at once.
 *
 * @throws {ProblemError} 'circuit-singular', 'circuit-too-large', 'output-unknown'
 * Source: A. C. Davies, IEEE Trans. Circuit Theory CT-13 (1966) 433 (nullors in nodal analysis); P. M. Lin, Symbolic
 * Network Analysis, Elsevier 1991 (expansion of the reduced matrix).
 */
export function admittanceRatio(netlist: Netlist, inputName?: string, outputName?: string): AdmittanceRatio {
  const input = portOf(netlist.inputs, inputName, 'input')
  const output = portOf(netlist.outputs, outputName, 'output')
  const passive = netlist.elements.filter((one) => one.kind !== 'opamp')
  const { voltageOf, columns, nodes } = voltagesOf(netlist, input)
  const sources = netlist.controlled ?? []
  if (passive.length + sources.length > PARTS_MAX || columns > NODES_MAX)
    throw new ProblemError(
      'circuit-too-large',
      `The circuit has ${passive.length} passive parts and ${columns} unknown voltages; in part names at most ${PARTS_MAX} and ${NODES_MAX} are worked out.`,
    )
  if (nodes.length + sources.length !== columns) throw singular()
  // The last column is the right-hand side.
  const rows = [
    ...nodes.map((group) => currentLaw(group, passive, voltageOf, columns)),
    ...sources.map((source, k) => sourceLaw(source, 2 ** (passive.length + k), voltageOf, columns)),
  ]
  const order = rows.map((_, k) => k).sort((a, b) => rows[a]!.size - rows[b]!.size)
  const minors = new Minors(order.map((k) => rows[k]!))
  const all = 2 ** columns - 1
  const determinant = minors.over(all)
  if (determinant.size === 0) throw singular()
  let numerator: AdmittanceSum = new Map()
  for (const [node, sign] of [
    [output.plus, 1],
    [output.minus, -1],
  ] as const) {
    const voltage = voltageOf(node)
    if ('known' in voltage) numerator = added(numerator, determinant, sign * voltage.known)
    else {
      const replaced = minors.over(all - 2 ** voltage.column + 2 ** columns)
      numerator = added(numerator, replaced, sign * ((columns - 1 - voltage.column) % 2 ? -1 : 1))
    }
  }
  return { passive, numerator, denominator: added(new Map(), determinant, 2), sources, nodes }
}

const singular = () =>
  new ProblemError('circuit-singular', 'The equations of the circuit have no unique solution: something floats.')

/** Nodes held at 0 V for signals, whatever drives the circuit. */
export function groundsOf(netlist: Netlist): Set<string> {
  return new Set([GROUND, ...netlist.signalGrounds])
}

/** Nodes held by sources, in halves of the source's voltage; the other inputs are at 0 V. */
export function drivenNodes(netlist: Netlist, input: NetPort): Map<string, number> {
  const grounds = groundsOf(netlist)
  const driven = new Map<string, number>()
  for (const port of netlist.inputs) {
    const live = port === input ? 1 : 0
    const single = grounds.has(port.plus) || grounds.has(port.minus)
    if (!grounds.has(port.plus)) driven.set(port.plus, live * (single ? 2 : 1))
    if (!grounds.has(port.minus)) driven.set(port.minus, live * (single ? -2 : -1))
  }
  return driven
}

function voltagesOf(netlist: Netlist, input: NetPort) {
  const driven = drivenNodes(netlist, input)
  const held = new Map([...[...groundsOf(netlist)].map((node): [string, number] => [node, 0]), ...driven])
  const parent = new Map<string, string>()
  const root = (node: string): string => {
    const above = parent.get(node)
    return above === undefined ? node : root(above)
  }
  const noCurrentLaw = new Set(held.keys())
  for (const one of netlist.elements) {
    if (one.kind !== 'opamp') continue
    if (noCurrentLaw.has(one.out)) throw singular()
    noCurrentLaw.add(one.out)
    const [a, b] = [root(one.plus), root(one.minus)]
    if (a === b || (held.has(a) && held.has(b))) throw singular()
    if (held.has(a)) parent.set(b, a)
    else parent.set(a, b)
  }
  const sources = netlist.controlled ?? []
  const used = [
    ...netlist.elements.flatMap((one) => (one.kind === 'opamp' ? [one.plus, one.minus, one.out] : [one.a, one.b])),
    ...sources.flatMap(({ a, b, plus, minus }) => [a, b, plus, minus]),
  ]
  let groups = [...new Set(used)].map((node) => [node])
  for (const { a, b } of sources) {
    const joined = groups.filter((group) => group.includes(a) || group.includes(b))
    groups = [...groups.filter((group) => !joined.includes(group)), joined.flat()]
  }
  const nodes = groups.filter((group) => !group.some((node) => noCurrentLaw.has(node)))
  const columnOf = new Map<string, number>()
  for (const node of used) {
    const at = root(node)
    if (!held.has(at) && !columnOf.has(at)) columnOf.set(at, columnOf.size)
  }
  const voltageOf = (node: string): Voltage => {
    const at = root(node)
    const known = held.get(at)
    if (known !== undefined) return { known }
    const column = columnOf.get(at)
    if (column === undefined)
      throw new ProblemError('circuit-singular', `Node ${node} floats: nothing holds its voltage.`)
    return { column }
  }
  return { voltageOf, columns: columnOf.size, nodes }
}

/** Entries of one equation by column, each a sum of single admittances or gains, or a plain number for the bit 0. */
class Row extends Map<number, AdmittanceSum> {
  constructor(
    private readonly voltageOf: (node: string) => Voltage,
    private readonly columns: number,
  ) {
    super()
  }

  /** Adds sign·(what the bit stands for)·v(node); what is known goes to the right-hand side. */
  enter(node: string, bit: number, sign: number): void {
    const voltage = this.voltageOf(node)
    const [column, value] = 'known' in voltage ? [this.columns, -sign * voltage.known] : [voltage.column, sign]
    const entry = added(this.get(column) ?? new Map(), new Map([[bit, value]]), 1)
    if (entry.size) this.set(column, entry)
    else this.delete(column)
  }
}

function currentLaw(
  group: readonly string[],
  passive: readonly PassiveElement[],
  voltageOf: (node: string) => Voltage,
  columns: number,
): Row {
  const row = new Row(voltageOf, columns)
  passive.forEach(({ a, b }, k) => {
    if (group.includes(a) === group.includes(b)) return
    row.enter(group.includes(a) ? a : b, 2 ** k, 1)
    row.enter(group.includes(a) ? b : a, 2 ** k, -1)
  })
  return row
}

function sourceLaw(
  { a, b, plus, minus }: ControlledSource,
  bit: number,
  voltageOf: (node: string) => Voltage,
  columns: number,
): Row {
  const row = new Row(voltageOf, columns)
  row.enter(a, 0, 1)
  row.enter(b, 0, -1)
  row.enter(plus, bit, -1)
  row.enter(minus, bit, 1)
  return row
}

function added(a: AdmittanceSum, b: AdmittanceSum, factor: number): AdmittanceSum {
  const sum = new Map(a)
  for (const [set, coefficient] of b) {
    const total = (sum.get(set) ?? 0) + factor * coefficient
    if (total === 0) sum.delete(set)
    else sum.set(set, total)
  }
  return sum
}

/** Minors of the last rows over sets of columns, each worked out once. */
class Minors {
  private readonly known = new Map<number, AdmittanceSum>()
  private work = 0
  constructor(private readonly rows: readonly ReadonlyMap<number, AdmittanceSum>[]) {}

  /** Determinant over a set of as many columns as there are rows. */
  over(columns: number): AdmittanceSum {
    return this.from(0, columns)
  }

  private from(row: number, columns: number): AdmittanceSum {
    if (row === this.rows.length) return new Map([[0, 1]])
    const known = this.known.get(columns)
    if (known) return known
    const minor = new Map<number, number>()
    for (const [column, entry] of this.rows[row]!) {
      if (!((columns >>> column) & 1)) continue
      const rest = this.from(row + 1, columns - 2 ** column)
      const sign = bitsIn(columns & (2 ** column - 1)) % 2 ? -1 : 1
      this.work += entry.size * rest.size
      if (this.work > WORK_MAX) throw tooManyTerms()
      for (const [bit, factor] of entry)
        for (const [set, coefficient] of rest) {
          if (set & bit) continue
          const total = (minor.get(set | bit) ?? 0) + sign * factor * coefficient
          if (total === 0) minor.delete(set | bit)
          else minor.set(set | bit, total)
        }
    }
    if (minor.size > TERMS_MAX) throw tooManyTerms()
    this.known.set(columns, minor)
    return minor
  }
}

const tooManyTerms = () =>
  new ProblemError(
    'circuit-too-large',
    `H(s) of this circuit has more than ${TERMS_MAX} terms in part names; the response in numbers is still worked out.`,
  )

function bitsIn(set: number): number {
  let count = 0
  for (let rest = set; rest; rest &= rest - 1) count++
  return count
}
