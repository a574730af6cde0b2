import type { ElementValues, NetElement, NetPort, Netlist } from '../circuit/netlist/netlist'
import { GROUND } from '../circuit/netlist/netlist'
import type { Problem } from '../problems'
import { ProblemError } from '../problems'
import type { Amplifiers } from './op-amp/amplifier'
import { amplifierOf, inverseGain, isNullor } from './op-amp/amplifier'
import type { Pencil } from './pencil'

/** What an unknown of the equations is: the voltage of a node or the current of a branch. */
export type Unknown =
  { kind: 'voltage'; nodes: string[] } | { kind: 'current'; of: 'element' | 'opamp' | 'port'; name: string }

/** A node driven against ground: voltage behind a resistance. */
export interface Drive {
  port: string
  node: string
  volt: number
  ohm: number
}

/** The equations of a circuit at given values: (G + sC)x = b. */
export interface Tableau {
  pencil: Pencil
  unknowns: Unknown[]
  rhs: Float64Array
  /** Row (and column) of each drive's current. */
  driveColumn: Map<string, number>
  /** Row of the law of each element; of an op-amp the row in which v(plus) − v(minus) stands. */
  lawRow: Map<string, number>
  /** Column of a node's voltage, −1 for ground. */
  columnOf(node: string): number
  /** Typical rate of the elements, rad/s; where a search for poles starts. */
  rateRadPerSec: number
}

/**
 * Writes the equations of a circuit. Each element keeps its own current as unknown and its own law as a row
 * (v_a − v_b − R i = 0; sC(v_a − v_b) − i = 0; v_a − v_b − sL i = 0), so that no large conductance is ever added to a
 * small one: element ratios of many decades lose no digits. Shorts are merged nodes. An op-amp is a nullor: the row
 * v(plus) = v(minus) and a free current at its output; or, with a record, the row v(plus) − v(minus) = v_x/A(s) and
 * the inner source v_x behind its output resistance. A controlled source is the row v_a − v_b = gain·(v_plus − v_minus)
 * and a free current from a to b.
 *
 * @param elements with the load, if any
 * @param drives nodes held by sources
 * @param steady true at 0 Hz: capacitors open, inductors short
 * @param amplifiers real op-amps by designator, the others ideal
 * @throws {ProblemError} 'part-missing' naming every part without value; 'value-out-of-range'
 * Source: C.-W. Ho, A. E. Ruehli, P. A. Brennan, IEEE Trans. Circuits Syst. CAS-22 (1975) 504; sparse tableau:
 * G. D. Hachtel, R. K. Brayton, F. G. Gustavson, IEEE Trans. Circuit Theory CT-18 (1971) 101.
 */
export function tableau(
  netlist: Netlist,
  elements: readonly NetElement[],
  values: ElementValues,
  drives: readonly Drive[],
  steady: boolean,
  amplifiers: Amplifiers = {},
): Tableau {
  checkValues(elements, values)
  const merged = mergeShorts(netlist, elements, values, steady)
  const unknowns: Unknown[] = []
  const columns = new Map<string, number>()
  const columnOf = (node: string) => {
    const root = merged(node)
    if (root === GROUND) return -1
    const known = columns.get(root)
    if (known !== undefined) {
      const unknown = unknowns[known]!
      if (unknown.kind === 'voltage' && !unknown.nodes.includes(node)) unknown.nodes.push(node)
      return known
    }
    columns.set(root, unknowns.length)
    unknowns.push({ kind: 'voltage', nodes: [node] })
    return unknowns.length - 1
  }
  for (const element of elements)
    for (const node of element.kind === 'opamp' ? [element.plus, element.minus, element.out] : [element.a, element.b])
      columnOf(node)
  const controlled = netlist.controlled ?? []
  for (const { a, b, plus, minus } of controlled) [a, b, plus, minus].forEach(columnOf)
  for (const port of [...netlist.inputs, ...netlist.outputs]) [port.plus, port.minus].forEach(columnOf)

  const pencil: Pencil = { size: 0, row: [], column: [], g: [], c: [] }
  const entry = (row: number, column: number, g: number, c = 0) => {
    if (row < 0 || column < 0) return
    pencil.row.push(row)
    pencil.column.push(column)
    pencil.g.push(g)
    pencil.c.push(c)
  }
  const branch = (unknown: Unknown) => unknowns.push(unknown) - 1
  const lawRow = new Map<string, number>()
  for (const element of elements) {
    if (element.kind === 'opamp') {
      const k = branch({ kind: 'current', of: 'opamp', name: element.ref })
      entry(columnOf(element.out), k, 1)
      const amplifier = amplifierOf(amplifiers, element)
      const inner = (name: string) => branch({ kind: 'voltage', nodes: [`${element.ref} ${name}`] })
      let law = k
      if (amplifier && !isNullor(amplifier)) {
        const { perGain, perRate, secondSec } = inverseGain(amplifier)
        law = inner('source')
        entry(k, columnOf(element.out), 1)
        entry(k, law, -1)
        if (amplifier.outputOhm) entry(k, k, -amplifier.outputOhm)
        if (secondSec > 0) {
          const stage = inner('second pole')
          entry(stage, stage, 1)
          entry(stage, law, -1, -secondSec)
          entry(law, stage, -perGain, -perRate)
        } else entry(law, law, -perGain, -perRate)
      }
      lawRow.set(element.ref, law)
      const [plus, minus] = [columnOf(element.plus), columnOf(element.minus)]
      if (plus === minus) continue
      entry(law, plus, 1)
      entry(law, minus, -1)
      continue
    }
    const [a, b] = [columnOf(element.a), columnOf(element.b)]
    const value = values[element.ref]!
    const open = element.kind === 'capacitor' ? steady || value === 0 : value === Infinity
    if (a === b || open) continue
    const k = branch({ kind: 'current', of: 'element', name: element.ref })
    lawRow.set(element.ref, k)
    entry(a, k, 1)
    entry(b, k, -1)
    const capacitor = element.kind === 'capacitor'
    entry(k, a, capacitor ? 0 : 1, capacitor ? value : 0)
    entry(k, b, capacitor ? 0 : -1, capacitor ? -value : 0)
    if (capacitor) entry(k, k, -1)
    else if (element.kind === 'resistor') entry(k, k, -value)
    else entry(k, k, 0, -value)
  }
  for (const { ref, a, b, plus, minus, gain } of controlled) {
    const k = branch({ kind: 'current', of: 'element', name: ref })
    if (columnOf(a) !== columnOf(b)) {
      entry(columnOf(a), k, 1)
      entry(columnOf(b), k, -1)
    }
    const law = new Map<number, number>()
    const terms: [string, number][] = [
      [a, 1],
      [b, -1],
      [plus, -gain],
      [minus, gain],
    ]
    for (const [node, g] of terms) law.set(columnOf(node), (law.get(columnOf(node)) ?? 0) + g)
    for (const [column, g] of law) if (g !== 0) entry(k, column, g)
  }
  const driveColumn = new Map<string, number>()
  const driven: [number, number][] = []
  for (const drive of drives) {
    const k = branch({ kind: 'current', of: 'port', name: drive.port })
    const node = columnOf(drive.node)
    entry(node, k, 1)
    entry(k, node, 1)
    if (drive.ohm > 0) entry(k, k, -drive.ohm)
    driveColumn.set(drive.node, k)
    driven.push([k, drive.volt])
  }
  pencil.size = unknowns.length
  const rhs = new Float64Array(pencil.size)
  for (const [k, volt] of driven) rhs[k] = volt
  return { pencil, unknowns, rhs, driveColumn, lawRow, columnOf, rateRadPerSec: typicalRate(elements, values) }
}

/** Reads a port's voltage off a solution: +1 at plus, −1 at minus. */
export function portSelection({ columnOf }: Tableau, port: NetPort): [number, number][] {
  const [plus, minus] = [columnOf(port.plus), columnOf(port.minus)]
  if (plus === minus) return []
  return [[plus, 1] as [number, number], [minus, -1] as [number, number]].filter(([column]) => column >= 0)
}

function checkValues(elements: readonly NetElement[], values: ElementValues): void {
  const problems = elements.flatMap((element): Problem[] => {
    if (element.kind === 'opamp') return []
    const where = { pointer: `#/values/${element.ref}` }
    if (!Object.hasOwn(values, element.ref))
      return [{ code: 'part-missing', detail: `${element.ref} has no value.`, ...where }]
    const value = values[element.ref]!
    if (value >= 0 && (Number.isFinite(value) || element.kind === 'resistor')) return []
    return [
      { code: 'value-out-of-range', detail: `${element.ref} is ${value}; it takes a value from zero up.`, ...where },
    ]
  })
  const [first, ...more] = problems
  if (first) throw new ProblemError(first.code, first.detail, { pointer: first.pointer! }, more)
}

/** Names one node for each group of nodes that is one electrically; ground's group is called by ground. */
function mergeShorts(
  netlist: Netlist,
  elements: readonly NetElement[],
  values: ElementValues,
  steady: boolean,
): (node: string) => string {
  const parent = new Map<string, string>()
  const root = (node: string): string => {
    const above = parent.get(node)
    return above === undefined ? node : root(above)
  }
  const join = (a: string, b: string) => {
    const [one, other] = [root(a), root(b)]
    if (one !== other) parent.set(one === GROUND ? other : one, one === GROUND ? one : other)
  }
  for (const node of netlist.signalGrounds) join(node, GROUND)
  for (const element of elements) {
    if (element.kind === 'opamp' || element.kind === 'capacitor') continue
    if (values[element.ref] === 0 || (steady && element.kind === 'inductor')) join(element.a, element.b)
  }
  return root
}

function typicalRate(elements: readonly NetElement[], values: ElementValues): number {
  const mean = (kind: string) => {
    const logs = elements.flatMap((element) => {
      if (element.kind !== kind) return []
      const value = values[element.ref]!
      return value > 0 && Number.isFinite(value) ? [Math.log(value)] : []
    })
    return logs.length ? Math.exp(logs.reduce((sum, x) => sum + x, 0) / logs.length) : null
  }
  const [ohm, farad, henry] = [mean('resistor'), mean('capacitor'), mean('inductor')]
  if (farad && henry) return 1 / Math.sqrt(farad * henry)
  if (farad) return 1 / ((ohm ?? 1) * farad)
  return henry ? (ohm ?? 1) / henry : 1
}
