import type { Sizing } from '#shared/contracts/sizings'
import type { BenchCurve } from '../../composables/use-bench'

const decibel = (re: number, im: number) => 20 * Math.log10(Math.hypot(re, im))
const DEGREES = 180 / Math.PI

/** The stored response as a curve; nothing is computed from the circuit. */
export const storedCurve = ({ response, phaseRad }: Sizing): BenchCurve => ({
  frequenciesHz: response.frequenciesHz,
  magnitudeDb: response.re.map((re, k) => decibel(re, response.im[k]!)),
  phaseDegrees: phaseRad.map((rad) => DEGREES * rad),
})

/**
 * Level (dB) and phase (rad) at any frequency within the stored response, between its points in proportion to the
 * logarithm of frequency; exact at the stored points and at those of the test table.
 */
export function storedReading({ response, phaseRad, testTable }: Sizing) {
  const knots = [
    ...response.frequenciesHz.map((hertz, k) => ({
      hertz,
      levelDb: decibel(response.re[k]!, response.im[k]!),
      phaseRad: phaseRad[k]!,
    })),
    ...testTable.map((point) => ({ hertz: point.frequencyHz, levelDb: point.gainDb, phaseRad: point.phaseRad })),
  ].sort((a, b) => a.hertz - b.hertz)

  return (hertz: number): { levelDb: number; phaseRad: number } => {
    const above = knots.findIndex((knot) => knot.hertz >= hertz)
    const high = knots[above === -1 ? knots.length - 1 : above]
    const low = knots[Math.max(0, above - 1)]
    if (!high || !low) return { levelDb: NaN, phaseRad: NaN }
    if (above <= 0 || high.hertz === hertz || low.hertz === high.hertz) return high
    const part = Math.log(hertz / low.hertz) / Math.log(high.hertz / low.hertz)
    const nearer = part < 0.5 ? low : high
    const between = (a: number, b: number, plain: number) =>
      Number.isFinite(a) && Number.isFinite(b) ? a + part * (b - a) : plain
    return {
      levelDb: between(low.levelDb, high.levelDb, nearer.levelDb),
      phaseRad: between(low.phaseRad, high.phaseRad, nearer.phaseRad),
    }
  }
}
