import type { ElementValues, NetElement, NetPort, Netlist } from '../circuit/netlist/netlist'
import { GROUND } from '../circuit/netlist/netlist'
import type { Complex, ComplexArray } from '../numerics/complex'
import { complexArray } from '../numerics/complex'
import { ProblemError } from '../problems'
import type { Amplifiers } from './op-amp/amplifier'
import { amplifierOf, requireAmplifiers } from './op-amp/amplifier'
import { PencilSolver } from './pencil'
import { requireSolvable } from './singular'
import type { Drive, Tableau } from './tableau'
import { portSelection, tableau } from './tableau'

/** What is connected to a circuit when it is analysed; all ideal when left out. */
export interface CircuitConditions {
  /** Resistance of the source, ohm, in series with the input. */
  sourceOhm?: number | undefined
  /** Load at the output, ohm; none when 0, infinite or left out. */
  loadOhm?: number | undefined
  /** Load at the output, farad, in parallel with loadOhm. */
  loadFarad?: number | undefined
  /** Output that the load hangs on, and that is read when none is named; the first by default. */
  output?: string | undefined
  /** Input that is driven, the others being held at 0 V; the first by default. */
  input?: string | undefined
  /** Real op-amps by designator; an op-amp that is not among them is ideal. */
  amplifiers?: Amplifiers | undefined
}

/** A circuit with its conditions, ready for any set of values. */
export interface PreparedCircuit {
  netlist: Netlist
  elements: NetElement[]
  loadValues: ElementValues
  input: NetPort
  output: NetPort
  sourceOhm: number
  amplifiers: Amplifiers
}

/** What drives the circuit: its source, or a unit current into one of its ports with the source at 0 V. */
type Drivers = 'source' | 'ideal-source' | 'at-rest'

/** Designator of the load's resistance; the space keeps it apart from the circuit's own. */
export const LOAD_OHM = ' load R'
const LOAD_FARAD = ' load C'

/**
 * Prepares a circuit for analysis.
 * @throws {ProblemError} 'output-unknown'; 'circuit-singular' when the circuit has no input or no output port;
 *   'part-unknown', 'value-out-of-range' for the record of an op-amp
 */
export function prepareCircuit(netlist: Netlist, conditions: CircuitConditions = {}): PreparedCircuit {
  const { sourceOhm = 0, loadOhm = 0, loadFarad = 0, amplifiers = {} } = conditions
  const output = portOf(netlist.outputs, conditions.output, 'output')
  const input = portOf(netlist.inputs, conditions.input, 'input')
  const elements = [...netlist.elements]
  const loadValues: Record<string, number> = {}
  const load = (kind: 'resistor' | 'capacitor', ref: string, value: number) => {
    if (!(value > 0) || !Number.isFinite(value)) return
    elements.push({ kind, ref, a: output.plus, b: output.minus })
    loadValues[ref] = value
  }
  load('resistor', LOAD_OHM, loadOhm)
  load('capacitor', LOAD_FARAD, loadFarad)
  requireAmplifiers(amplifiers, elements)
  for (const opamp of netlist.elements) {
    if (opamp.kind !== 'opamp') continue
    const farad = amplifierOf(amplifiers, opamp)?.inputFarad
    if (!farad) continue
    const ref = ` ${opamp.ref} C_in`
    elements.push({ kind: 'capacitor', ref, a: opamp.plus, b: opamp.minus })
    loadValues[ref] = farad
  }
  return { netlist, elements, loadValues, input, output, sourceOhm, amplifiers }
}

export function portOf(ports: readonly NetPort[], name: string | undefined, role: 'input' | 'output'): NetPort {
  const port = name === undefined ? ports[0] : ports.find((one) => one.name === name)
  if (port) return port
  if (name === undefined) throw new ProblemError('circuit-singular', `The circuit has no ${role} port.`)
  const known = ports.map((one) => one.name).join(', ') || 'none'
  throw new ProblemError('output-unknown', `No ${role} is called ${name}; the circuit has ${known}.`)
}

/**
 * The equations of a prepared circuit at given values. A pair of nodes is driven by +½ V and −½ V against ground, each
 * behind half the source resistance.
 */
export function equationsOf(
  prepared: PreparedCircuit,
  values: ElementValues,
  steady: boolean,
  drivers: Drivers = 'source',
): Tableau {
  const { netlist, elements, loadValues, input } = prepared
  const grounds = new Set([GROUND, ...netlist.signalGrounds])
  const drives = netlist.inputs.flatMap((port): Drive[] => {
    const live = port === input
    const volt = live && drivers !== 'at-rest' ? 1 : 0
    const ohm = live && drivers !== 'ideal-source' ? prepared.sourceOhm : 0
    const drive = (node: string, share: number, half = Math.abs(share)): Drive[] =>
      grounds.has(node) ? [] : [{ port: port.name, node, volt: volt * share, ohm: ohm * half }]
    const single = grounds.has(port.minus) || grounds.has(port.plus)
    return single
      ? [...drive(port.plus, 1), ...drive(port.minus, -1)]
      : [...drive(port.plus, 0.5), ...drive(port.minus, -0.5)]
  })
  const equations = tableau(netlist, elements, { ...values, ...loadValues }, drives, steady, prepared.amplifiers)
  requireSolvable(equations, elements, steady)
  return equations
}

/**
 * H(j2πf): voltage at an output for 1 V at the input, by modified nodal analysis, op-amps as prepared: ideal or real.
 *
 * @param values ohm, farad, henry by designator
 * @param frequenciesHz Hz, ≥ 0; at 0 capacitors are open and inductors short, exactly
 * @param output name of the output, the prepared one by default
 * @returns V/V, shape [n]
 * @throws {ProblemError} 'part-missing', 'circuit-singular', 'output-unknown'
 */
export function response(
  prepared: PreparedCircuit,
  values: ElementValues,
  frequenciesHz: ArrayLike<number>,
  output?: string,
): ComplexArray {
  const port = output === undefined ? prepared.output : portOf(prepared.netlist.outputs, output, 'output')
  return sweep(prepared, values, frequenciesHz, 'source', (equations) => ({
    rhs: equations.rhs,
    read: portSelection(equations, port),
  }))
}

/**
 * H(s) at one complex frequency.
 * @param s rad/s
 * @returns V/V; infinite at a pole
 * @throws {ProblemError} as response
 */
export function responseAt(prepared: PreparedCircuit, values: ElementValues, s: Complex, output?: string): Complex {
  const port = output === undefined ? prepared.output : portOf(prepared.netlist.outputs, output, 'output')
  const steady = s.re === 0 && s.im === 0
  const equations = equationsOf(prepared, values, steady)
  const solver = new PencilSolver(equations.pencil)
  return readAt(solver, s.re, s.im, equations.rhs, portSelection(equations, port))
}

/**
 * Impedance seen by the source at an input: voltage over current with an ideal source at that port, the load in place
 * and the other inputs at 0 V. A pair is driven in balance. Infinite where no current flows.
 * @param port name of the input, the prepared one by default
 * @returns ohm, shape [n]
 * @throws {ProblemError} as response
 */
export function inputImpedance(
  prepared: PreparedCircuit,
  values: ElementValues,
  frequenciesHz: ArrayLike<number>,
  port?: string,
): ComplexArray {
  const input = port === undefined ? prepared.input : portOf(prepared.netlist.inputs, port, 'input')
  const driven = { ...prepared, input }
  const currents = sweep(driven, values, frequenciesHz, 'ideal-source', ({ rhs, driveColumn }) => {
    const plus = driveColumn.get(input.plus)
    const minus = driveColumn.get(input.minus)
    const share = plus !== undefined && minus !== undefined ? 0.5 : 1
    // A drive's own current runs from the node into the source.
    const read: [number, number][] = []
    if (plus !== undefined) read.push([plus, -share])
    if (minus !== undefined) read.push([minus, share])
    return { rhs, read }
  })
  for (let k = 0; k < currents.re.length; k++) {
    const [re, im] = [currents.re[k]!, currents.im[k]!]
    const size = re * re + im * im
    currents.re[k] = size === 0 ? Infinity : re / size
    currents.im[k] = size === 0 ? 0 : 0 - im / size
  }
  return currents
}

/**
 * Impedance seen by the load at an output: voltage for a unit current fed in, the input at 0 V behind the source
 * resistance. A load that was prepared counts as part of the circuit.
 * @param output name of the output, the prepared one by default
 * @returns ohm, shape [n]
 * @throws {ProblemError} as response
 */
export function outputImpedance(
  prepared: PreparedCircuit,
  values: ElementValues,
  frequenciesHz: ArrayLike<number>,
  output?: string,
): ComplexArray {
  const port = output === undefined ? prepared.output : portOf(prepared.netlist.outputs, output, 'output')
  return sweep(prepared, values, frequenciesHz, 'at-rest', (equations) => {
    const rhs = new Float64Array(equations.pencil.size)
    const read = portSelection(equations, port)
    for (const [column, sign] of read) rhs[column] = sign
    return { rhs, read: read }
  })
}

interface Reading {
  rhs: Float64Array
  read: [column: number, sign: number][]
}

function sweep(
  prepared: PreparedCircuit,
  values: ElementValues,
  frequenciesHz: ArrayLike<number>,
  drivers: Drivers,
  ask: (equations: Tableau) => Reading,
): ComplexArray {
  const found = complexArray(frequenciesHz.length)
  const made: { solver: PencilSolver; reading: Reading }[] = []
  for (let k = 0; k < frequenciesHz.length; k++) {
    const steady = frequenciesHz[k] === 0
    const which = steady ? 1 : 0
    if (!made[which]) {
      const equations = equationsOf(prepared, values, steady, drivers)
      made[which] = { solver: new PencilSolver(equations.pencil), reading: ask(equations) }
    }
    const { solver, reading } = made[which]
    const value = readAt(solver, 0, 2 * Math.PI * frequenciesHz[k]!, reading.rhs, reading.read)
    found.re[k] = value.re
    found.im[k] = value.im
  }
  return found
}

function readAt(solver: PencilSolver, sRe: number, sIm: number, rhs: Float64Array, read: [number, number][]): Complex {
  if (!solver.at(sRe, sIm)) return { re: Infinity, im: 0 }
  const x = solver.solve(rhs)
  const value = { re: 0, im: 0 }
  for (const [column, sign] of read) {
    value.re += sign * x.re[column]!
    value.im += sign * x.im[column]!
  }
  return value
}
