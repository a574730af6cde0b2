import type { PreparedCircuit } from '../analysis/nodal-analysis'
import { inputImpedance, outputImpedance, prepareCircuit, response } from '../analysis/nodal-analysis'
import { gainAtHighFrequency, halfPower, notch, peak, rippleEdge } from '../analysis/figures'
import type { RationalTransferFunction } from '../analysis/rational'
import { polePairs, rationalTransferFunction } from '../analysis/rational'
import type { Conditions } from '../contracts/conditions'
import type { ComplexArray } from '../numerics/complex'
import type { ElementValues } from '../circuit/netlist/netlist'
import type { Figure, FigureFrequency } from './figure'
import type { Stage, StageResult } from './stage'
import type { PartValues } from './values'
import { elementValues } from './values'

const prepared = new WeakMap<Stage, Map<string, PreparedCircuit>>()

/** A circuit prepared once for each combination of source, load and output. */
function preparedFor(stage: Stage, conditions: Conditions, output: string): PreparedCircuit {
  const all = prepared.get(stage) ?? new Map<string, PreparedCircuit>()
  prepared.set(stage, all)
  const { sourceOhm, loadOhm, loadFarad } = conditions
  const key = JSON.stringify([output, sourceOhm, loadOhm, loadFarad])
  const kept = all.get(key)
  if (kept) return kept
  if (all.size > 20) all.clear()
  const made = prepareCircuit(stage.netlist, { sourceOhm, loadOhm, loadFarad, output })
  all.set(key, made)
  return made
}

const found = new WeakMap<PartValues, Map<string, CircuitFigures>>()

/**
 * The figures of one set of values, shared by all who ask for the same set: results, plot, phase and cursor.
 * @param values must not be changed afterwards
 */
export function circuitFigures(stage: Stage, values: PartValues, conditions: Conditions): CircuitFigures {
  const { sourceOhm, loadOhm, loadFarad } = conditions
  const key = JSON.stringify([sourceOhm, loadOhm, loadFarad])
  const all = found.get(values) ?? new Map<string, CircuitFigures>()
  found.set(values, all)
  const kept = all.get(key)
  if (kept?.isOf(stage)) return kept
  const made = new CircuitFigures(stage, values, conditions)
  all.set(key, made)
  return made
}

/**
 * What is found on the circuit itself at one set of values, never through the block's formulas. Each thing is computed
 * when first asked for.
 */
export class CircuitFigures {
  private readonly values: ElementValues
  private readonly rationals = new Map<string, RationalTransferFunction>()

  constructor(
    private readonly stage: Stage,
    values: PartValues,
    private readonly conditions: Conditions,
  ) {
    this.values = elementValues(stage, values)
  }

  isOf(stage: Stage): boolean {
    return this.stage === stage
  }

  /** H at the frequencies, by nodal analysis; shape [n]. */
  response(output: string, frequenciesHz: ArrayLike<number>): ComplexArray {
    return response(preparedFor(this.stage, this.conditions, output), this.values, frequenciesHz, output)
  }

  rational(output: string): RationalTransferFunction {
    const kept = this.rationals.get(output)
    if (kept) return kept
    const made = rationalTransferFunction(preparedFor(this.stage, this.conditions, output), this.values, output)
    this.rationals.set(output, made)
    return made
  }

  /** Lowest and highest frequency of the poles and zeros away from 0, Hz; 1 kHz when there is none. */
  span(output: string): [number, number] {
    const { poles, zeros } = this.rational(output)
    const frequencies = [...poles, ...zeros]
      .map((root) => Math.hypot(root.re, root.im) / (2 * Math.PI))
      .filter((f) => f > 1e-9)
    return frequencies.length ? [Math.min(...frequencies), Math.max(...frequencies)] : [1e3, 1e3]
  }

  /**
   * The figure that a result names by `is:`, NaN where the circuit has none.
   * @param env the vector, for a gain at a frequency that is itself a result
   */
  find(result: StageResult, env: Float64Array): number {
    return result.is ? this.figure(result.is, result.output, env) : NaN
  }

  private figure(figure: Figure, output: string, env: Float64Array): number {
    switch (figure.kind) {
      case 'half-power': {
        const edges = halfPower(this.rational(output))
        return edgeOf(edges, figure.edge)
      }
      case 'ripple-edge':
        return edgeOf(rippleEdge(this.rational(output), figure.decibel), figure.edge)
      case 'natural-frequency':
        return polePairs(this.rational(output).poles)[figure.pair]?.naturalHz ?? NaN
      case 'quality-factor':
        return polePairs(this.rational(output).poles)[figure.pair]?.q ?? NaN
      case 'peak-gain':
        return this.signedPeak(output)
      case 'peak-frequency':
        return peak(this.rational(output))?.frequencyHz ?? NaN
      case 'notch-depth':
        return notch(this.rational(output))?.depth ?? NaN
      case 'notch-frequency':
        return notch(this.rational(output))?.frequencyHz ?? NaN
      case 'gain':
        return this.gain(output, figure.frequency, env)
      case 'input-impedance':
        return this.impedance(inputImpedance, output, figure.frequency, env)
      case 'output-impedance':
        return this.impedance(outputImpedance, output, figure.frequency, env)
    }
  }

  /** Gain with the sign of its real part: −2 for an inverting stage. */
  private gain(output: string, frequency: FigureFrequency, env: Float64Array): number {
    if (frequency.at === 'high') return gainAtHighFrequency(this.rational(output))
    return signedSize(this.response(output, [this.hertz(frequency, env)]))
  }

  /** Gain at the peak, signed as any gain is. */
  private signedPeak(output: string): number {
    const found = peak(this.rational(output))
    if (!found || !Number.isFinite(found.frequencyHz)) return found?.gain ?? NaN
    return this.response(output, [found.frequencyHz]).re[0]! < 0 ? -found.gain : found.gain
  }

  /** |Z|, ohm. */
  private impedance(of: typeof inputImpedance, output: string, frequency: FigureFrequency, env: Float64Array): number {
    const [, high] = this.span(output)
    const hertz = frequency.at === 'high' ? 1e6 * high : this.hertz(frequency, env)
    const found = of(preparedFor(this.stage, this.conditions, output), this.values, [hertz])
    return Math.hypot(found.re[0]!, found.im[0]!)
  }

  private hertz(frequency: FigureFrequency, env: Float64Array): number {
    if (frequency.at === 'zero') return 0
    if (frequency.at === 'hertz') return frequency.hertz
    return frequency.at === 'result' ? env[this.stage.slots.get(frequency.result)!]! : NaN
  }
}

const edgeOf = (edges: { lowerHz?: number; upperHz?: number } | null, edge: 'only' | 'lower' | 'upper') =>
  (edge === 'lower' ? edges?.lowerHz : edge === 'upper' ? edges?.upperHz : (edges?.upperHz ?? edges?.lowerHz)) ?? NaN

const signedSize = (h: ComplexArray) => (h.re[0]! < 0 ? -1 : 1) * Math.hypot(h.re[0]!, h.im[0]!)
