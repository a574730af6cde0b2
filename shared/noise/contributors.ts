import type { PreparedCircuit } from '../analysis/nodal-analysis'
import { LOAD_OHM } from '../analysis/nodal-analysis'
import { amplifierOf } from '../analysis/op-amp/amplifier'
import type { Tableau } from '../analysis/tableau'
import type { ElementValues, OpampElement } from '../circuit/netlist/netlist'
import type { ComplexArray } from '../numerics/complex'
import { amplifierNoise } from './amplifier-noise'
import { thermalNoise } from './johnson-nyquist'

/** One independent source of noise in a circuit. */
export interface Contributor {
  /** `R1`, `U1.e_n`, `U1.i_n(+)`, `U1.i_n(-)`; `source R` and `load R` for the conditions. */
  name: string
  /** Equation that it stands in as a unit voltage or current; none where nothing of it reaches the circuit. */
  rowIn(equations: Tableau): number | undefined
  /** Its density at the output, V/√Hz, from the output voltage for a unit in that equation. */
  density(transfer: ComplexArray, frequenciesHz: ArrayLike<number>): Float64Array
}

/**
 * The sources of noise of a circuit: every resistor, e_n in series with the non-inverting input of each op-amp, i_n from
 * each of its inputs to ground. An input tied to ground has no current contributor; what an op-amp's record leaves out
 * makes no noise.
 *
 * @param values ohm by designator
 * @param equations those of the circuit above 0 Hz
 * @param tempKelvin kelvin, > 0
 */
export function contributorsOf(
  prepared: PreparedCircuit,
  values: ElementValues,
  equations: Tableau,
  tempKelvin: number,
): Contributor[] {
  const ohms = { ...values, ...prepared.loadValues }
  const found: Contributor[] = []
  for (const element of prepared.elements) {
    if (element.kind === 'opamp') found.push(...amplifierContributors(prepared, element, equations))
    if (element.kind !== 'resistor') continue
    const name = element.ref === LOAD_OHM ? LOAD_OHM.trim() : element.ref
    found.push(resistor(name, ohms[element.ref]!, tempKelvin, ({ lawRow }) => lawRow.get(element.ref)))
  }
  if (prepared.sourceOhm > 0) {
    const { plus, minus } = prepared.input
    const nodes = [plus, minus].filter((node) => equations.driveColumn.has(node))
    for (const node of nodes)
      found.push(
        resistor('source R', prepared.sourceOhm / nodes.length, tempKelvin, ({ driveColumn }) => driveColumn.get(node)),
      )
  }
  return found
}

/** A resistor's noise as a voltage in its own equation, where a current across it makes R times as much. */
const resistor = (name: string, ohm: number, tempKelvin: number, rowIn: Contributor['rowIn']): Contributor => ({
  name,
  rowIn,
  density: (transfer) =>
    ohm > 0 && Number.isFinite(ohm)
      ? thermalNoise(ohm, { re: transfer.re.map((x) => x * ohm), im: transfer.im.map((x) => x * ohm) }, tempKelvin)
      : new Float64Array(transfer.re.length),
})

function amplifierContributors(
  { amplifiers }: PreparedCircuit,
  opamp: OpampElement,
  { columnOf }: Tableau,
): Contributor[] {
  const amplifier = amplifierOf(amplifiers, opamp)
  if (!amplifier) return []
  const { noiseVoltPerRtHz: volt, noiseAmpPerRtHz: amp, noiseVoltCornerHz = 0, noiseAmpCornerHz = 0 } = amplifier
  const found: Contributor[] = []
  if (volt !== undefined)
    found.push({
      name: `${opamp.ref}.e_n`,
      rowIn: ({ lawRow }) => lawRow.get(opamp.ref),
      density: (transfer, frequenciesHz) => amplifierNoise(volt, noiseVoltCornerHz, transfer, frequenciesHz),
    })
  if (amp === undefined) return found
  const inputs = [
    ['+', opamp.plus],
    ['-', opamp.minus],
  ] as const
  for (const [sign, node] of inputs)
    if (columnOf(node) >= 0)
      found.push({
        name: `${opamp.ref}.i_n(${sign})`,
        rowIn: (equations) => equations.columnOf(node),
        density: (transfer, frequenciesHz) => amplifierNoise(amp, noiseAmpCornerHz, transfer, frequenciesHz),
      })
  return found
}
