import type { ComplexArray } from '../numerics/complex'

/**
 * Noise of one source of an op-amp, e_n or i_n, at the output of a circuit: white, and below its corner growing as 1/√f.
 *
 *     v_n(f) = n · √(1 + f_corner/f) · |T(f)|
 *
 * @param whitePerRtHz n, V/√Hz or A/√Hz, ≥ 0
 * @param cornerHz where the 1/f part equals the white one, Hz; 0 for none
 * @param transfer T: output voltage for a unit of the source, V/V or ohm; shape [n], one a frequency
 * @param frequenciesHz f, Hz, ≥ 0; at 0 the density of 1/f noise is infinite
 * @returns one-sided density, V/√Hz, shape [n]
 * Source: C. D. Motchenbacher, F. C. Fitchen, Low-Noise Electronic Design, 1973 (from memory).
 */
export function amplifierNoise(
  whitePerRtHz: number,
  cornerHz: number,
  transfer: ComplexArray,
  frequenciesHz: ArrayLike<number>,
): Float64Array {
  return transfer.re.map((re, k) => {
    const size = Math.hypot(re, transfer.im[k]!)
    if (size === 0 || whitePerRtHz === 0) return 0
    const rise = cornerHz > 0 ? 1 + cornerHz / frequenciesHz[k]! : 1
    return whitePerRtHz * Math.sqrt(rise) * size
  })
}
