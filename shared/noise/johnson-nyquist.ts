import type { ComplexArray } from '../numerics/complex'
import { requirePositive } from '../numerics/require-positive'

/** k, J/K, exact. Source: SI brochure, 9th edition (2019). */
export const BOLTZMANN = 1.380649e-23

/** 27 °C, kelvin: what circuit simulators take when nothing else is said. */
export const USUAL_KELVIN = 300.15

/**
 * Noise of one resistor at the output of a circuit.
 *
 *     v_n(f) = √(4 k T / R) · |Z_t(f)|
 *
 * @param resistanceOhm R, ohm, > 0
 * @param transimpedanceOhm Z_t: output voltage for a unit current fed in across R, ohm; shape [n], one a frequency
 * @param tempKelvin T, kelvin, > 0
 * @returns one-sided density, V/√Hz, shape [n]
 * @throws {ProblemError} 'value-not-positive' when R or T is not above zero
 * @example thermalNoise(10e3, { re: Float64Array.of(10e3), im: Float64Array.of(0) }, 300)[0] // 1.2872e-8
 * Source: J. B. Johnson, Phys. Rev. 32 (1928) 97; H. Nyquist, Phys. Rev. 32 (1928) 110.
 */
export function thermalNoise(resistanceOhm: number, transimpedanceOhm: ComplexArray, tempKelvin: number): Float64Array {
  requirePositive({ resistanceOhm, tempKelvin })
  const ampPerRtHz = Math.sqrt((4 * BOLTZMANN * tempKelvin) / resistanceOhm)
  return transimpedanceOhm.re.map((re, i) => ampPerRtHz * Math.hypot(re, transimpedanceOhm.im[i]!))
}
