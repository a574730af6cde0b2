import type { PreparedCircuit } from '../analysis/nodal-analysis'
import { naturalFrequencies } from '../analysis/rational'
import type { ElementValues } from '../circuit/netlist/netlist'
import { requirePositive } from '../numerics/require-positive'
import { ProblemError } from '../problems'
import type { NoiseConditions } from './output-noise'
import { outputNoise } from './output-noise'
import { quadratureOver } from './band-quadrature'

/** Noise at an output over a band, V rms. */
export interface IntegratedNoise {
  integratedVolt: number
  /** By the names of NoiseSpectrum; their squares add up to the whole. */
  integratedByContributor: Record<string, number>
}

/**
 * Noise at an output over a band: the root of the integral of the squared density, by contributor. The points lie by
 * the circuit's own poles, so that no resonance is too narrow to be seen.
 *
 * @param values ohm, farad, henry by designator
 * @param bandHz from and to, Hz, both > 0, ascending
 * @throws {ProblemError} as outputNoise; 'value-not-positive', 'value-out-of-range' for the band
 */
export function integratedNoise(
  prepared: PreparedCircuit,
  values: ElementValues,
  bandHz: readonly [fromHz: number, toHz: number],
  conditions: NoiseConditions = {},
): IntegratedNoise {
  const [fromHz, toHz] = bandHz
  requirePositive({ fromHz, toHz })
  if (fromHz >= toHz)
    throw new ProblemError('value-out-of-range', `The band runs from ${fromHz} Hz to ${toHz} Hz; it must ascend.`)
  const { frequenciesHz, weightsHz } = quadratureOver(fromHz, toHz, naturalFrequencies(prepared, values))
  const { densityVoltPerRtHz, byContributor } = outputNoise(prepared, values, frequenciesHz, conditions)
  const integral = (density: Float64Array) =>
    Math.sqrt(density.reduce((sum, x, k) => (x === 0 ? sum : sum + x * x * weightsHz[k]!), 0))
  return {
    integratedVolt: integral(densityVoltPerRtHz),
    integratedByContributor: Object.fromEntries(
      Object.entries(byContributor).map(([name, density]) => [name, integral(density)]),
    ),
  }
}

/**
 * Signal-to-noise ratio.
 * @param signalVolt V rms, > 0
 * @param noiseVolt V rms, ≥ 0
 * @returns dB; infinite without noise
 * @throws {ProblemError} 'value-not-positive' for the signal
 */
export function signalToNoiseDb(signalVolt: number, noiseVolt: number): number {
  requirePositive({ signalVolt })
  return 20 * Math.log10(signalVolt / noiseVolt)
}
