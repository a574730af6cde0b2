import type { Complex } from '../numerics/complex'
import type { RationalTransferFunction } from './rational'

/**
 * Phase of H for e^{+jωt}, rad, unwrapped. Its limit at low frequency lies in (−π, π], −1 being +π, and it runs on
 * continuously from there. A zero on the axis is a step of +π (half of it exactly there), a pole on the axis one of −π.
 *
 * @param frequenciesHz Hz, ≥ 0, in any order
 * @returns rad, shape [n]; NaN where nothing comes through
 */
export function phaseRad(h: RationalTransferFunction, frequenciesHz: ArrayLike<number>): Float64Array {
  const start = h.gain === 0 ? NaN : lowFrequencyPhase(h)
  return Float64Array.from({ length: frequenciesHz.length }, (_, k) => {
    const w = 2 * Math.PI * frequenciesHz[k]!
    let phase = start
    for (const zero of h.zeros) phase += turn(zero, w)
    for (const pole of h.poles) phase -= turn(pole, w)
    return phase
  })
}

/**
 * Group delay −dφ/dω, seconds; zeros and poles on the imaginary axis add nothing to it but at their own frequency.
 * @param frequenciesHz Hz, ≥ 0
 * @returns shape [n]
 */
export function groupDelaySec(h: RationalTransferFunction, frequenciesHz: ArrayLike<number>): Float64Array {
  return Float64Array.from({ length: frequenciesHz.length }, (_, k) => {
    const w = 2 * Math.PI * frequenciesHz[k]!
    let delay = 0
    for (const pole of h.poles) delay += turnRate(pole, w)
    for (const zero of h.zeros) delay -= turnRate(zero, w)
    return delay
  })
}

/** H tends to K·(jω)^k: the sign of K and k quarter turns, brought into (−π, π]. */
function lowFrequencyPhase({ poles, zeros, gain }: RationalTransferFunction): number {
  const atOrigin = ({ re, im }: Complex) => re === 0 && im === 0
  const rightHalf = ({ re, im }: Complex) => im === 0 && re > 0
  const quarters = zeros.filter(atOrigin).length - poles.filter(atOrigin).length
  // A real factor (0 − r) is negative for r > 0; conjugate pairs are positive.
  const negative = zeros.filter(rightHalf).length + poles.filter(rightHalf).length + (gain < 0 ? 1 : 0)
  const turns = (((quarters + 2 * negative) % 4) + 4) % 4
  return turns === 3 ? -Math.PI / 2 : (turns * Math.PI) / 2
}

/** Angle by which jω − root has turned since ω = 0. */
function turn({ re, im }: Complex, w: number): number {
  if (re === 0) {
    if (im <= 0) return 0
    return w > im ? Math.PI : w === im ? Math.PI / 2 : 0
  }
  const size = Math.abs(re)
  const angle = Math.atan((w - im) / size) + Math.atan(im / size)
  return re < 0 ? angle : -angle
}

const turnRate = ({ re, im }: Complex, w: number) => (re === 0 ? 0 : -re / (re * re + (w - im) * (w - im)))
