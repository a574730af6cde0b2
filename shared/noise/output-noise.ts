import type { PreparedCircuit } from '../analysis/nodal-analysis'
import { equationsOf, portOf } from '../analysis/nodal-analysis'
import type { Pencil } from '../analysis/pencil'
import { PencilSolver } from '../analysis/pencil'
import type { Tableau } from '../analysis/tableau'
import { portSelection } from '../analysis/tableau'
import type { ElementValues, NetPort } from '../circuit/netlist/netlist'
import type { ComplexArray } from '../numerics/complex'
import { complexArray } from '../numerics/complex'
import { requirePositive } from '../numerics/require-positive'
import { contributorsOf } from './contributors'
import { USUAL_KELVIN } from './johnson-nyquist'

/** Under what noise is computed. */
export interface NoiseConditions {
  /** Temperature of every resistor, kelvin, > 0; 300.15 when left out. */
  tempKelvin?: number | undefined
  /** Name of the output, the prepared one by default. */
  output?: string | undefined
}

/** One-sided noise densities at an output; shape [n], one a frequency. */
export interface NoiseSpectrum {
  /** All contributors together, V/√Hz. */
  densityVoltPerRtHz: Float64Array
  /** V/√Hz at the output, by `R1`, `U1.e_n`, `U1.i_n(+)`, `U1.i_n(-)`, `source R`, `load R`. */
  byContributor: Record<string, Float64Array>
  /** The whole over |H|: a source in series with the input that makes the same noise, V/√Hz; infinite where H is 0. */
  inputReferredVoltPerRtHz: Float64Array
}

/**
 * Noise at an output of a circuit, by contributor: Johnson–Nyquist noise of the resistors, e_n and i_n of the op-amps
 * that are prepared with them, all independent. One solution of the adjoint equations a frequency gives the way of
 * every source to the output.
 *
 * @param values ohm, farad, henry by designator
 * @param frequenciesHz Hz, ≥ 0
 * @throws {ProblemError} 'part-missing', 'circuit-singular', 'output-unknown'; 'value-not-positive' for the temperature
 * Source: adjoint network: R. Rohrer, L. Nagel, R. Meyer, L. Weber, IEEE J. Solid-State Circuits SC-6 (1971) 204.
 */
export function outputNoise(
  prepared: PreparedCircuit,
  values: ElementValues,
  frequenciesHz: ArrayLike<number>,
  { tempKelvin = USUAL_KELVIN, output }: NoiseConditions = {},
): NoiseSpectrum {
  requirePositive({ tempKelvin })
  const port = output === undefined ? prepared.output : portOf(prepared.netlist.outputs, output, 'output')
  const contributors = contributorsOf(prepared, values, equationsOf(prepared, values, false), tempKelvin)
  const count = frequenciesHz.length
  const transfers = contributors.map(() => complexArray(count))
  const gain = new Float64Array(count)
  const made: { equations: Tableau; adjoint: Adjoint }[] = []
  for (let k = 0; k < count; k++) {
    const which = frequenciesHz[k] === 0 ? 1 : 0
    if (!made[which]) {
      const equations = equationsOf(prepared, values, which === 1)
      made[which] = { equations, adjoint: new Adjoint(equations, port) }
    }
    const { equations, adjoint } = made[which]
    const ways = adjoint.at(2 * Math.PI * frequenciesHz[k]!)
    contributors.forEach(({ rowIn }, c) => {
      const row = rowIn(equations) ?? -1
      if (row < 0) return
      transfers[c]!.re[k] = ways.re[row]!
      transfers[c]!.im[k] = ways.im[row]!
    })
    gain[k] = gainOf(equations.rhs, ways)
  }
  const squares = new Float64Array(count)
  const byContributor = new Map<string, Float64Array>()
  contributors.forEach(({ name, density }, c) => {
    const own = density(transfers[c]!, frequenciesHz)
    own.forEach((x, k) => (squares[k]! += x * x))
    const before = byContributor.get(name)
    byContributor.set(name, before ? own.map((x, k) => Math.hypot(x, before[k]!)) : own)
  })
  const densityVoltPerRtHz = squares.map(Math.sqrt)
  return {
    densityVoltPerRtHz,
    byContributor: Object.fromEntries(byContributor),
    inputReferredVoltPerRtHz: densityVoltPerRtHz.map((x, k) => (gain[k] === 0 ? Infinity : x / gain[k]!)),
  }
}

/** Output voltage for a unit in each equation: the transposed equations, driven by the output's selection. */
class Adjoint {
  private readonly solver: PencilSolver
  private readonly selection: Float64Array

  constructor(equations: Tableau, port: NetPort) {
    const { size, row, column, g, c } = equations.pencil
    const transposed: Pencil = { size, row: column, column: row, g, c }
    this.solver = new PencilSolver(transposed)
    this.selection = new Float64Array(size)
    for (const [at, sign] of portSelection(equations, port)) this.selection[at] = sign
  }

  /** @returns a view of the work array: valid until the next call */
  at(radPerSec: number): ComplexArray {
    if (this.solver.at(0, radPerSec)) return this.solver.solve(this.selection)
    return { re: new Float64Array(this.selection.length).fill(Infinity), im: new Float64Array(this.selection.length) }
  }
}

function gainOf(rhs: Float64Array, ways: ComplexArray): number {
  let re = 0
  let im = 0
  rhs.forEach((drive, row) => {
    if (drive === 0) return
    re += drive * ways.re[row]!
    im += drive * ways.im[row]!
  })
  return Math.hypot(re, im)
}
