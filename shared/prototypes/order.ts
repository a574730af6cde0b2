import { ProblemError } from '../problems'
import { arithmeticGeometricMean, modulusOf } from './elliptic-functions'
import { rippleFactor } from './ripple'

export type BandEdges = readonly [number, number]

interface LossSpec {
  /** Largest loss in the pass band, dB. */
  passDb: number
  /** Least loss in the stop band, dB. */
  stopDb: number
}
interface EdgeSpec extends LossSpec {
  passHz: number
  stopHz: number
}
interface BandSpec extends LossSpec {
  passHz: BandEdges
  stopHz: BandEdges
}
export type BandPassSpec = BandSpec & { type: 'band-pass' }
export type BandStopSpec = BandSpec & { type: 'band-stop' }

/** An attenuation specification: edges in hertz, losses in decibels. */
export type AttenuationSpec =
  (EdgeSpec & { type: 'low-pass' }) | (EdgeSpec & { type: 'high-pass' }) | BandPassSpec | BandStopSpec

export const ORDER_FAMILIES = ['butterworth', 'chebyshev1', 'chebyshev2', 'elliptic'] as const
export type OrderFamily = (typeof ORDER_FAMILIES)[number]

/** `order` is the next whole number above `realOrder`, of the low-pass prototype. */
export interface OrderEstimate {
  order: number
  realOrder: number
}

/** Largest loss taken, dB. */
const MAX_SPEC_DB = 1000
/** What an edge met exactly costs in rounding must not raise the order. */
const ROUNDING = 1e-9

/**
 * Least order of each family that keeps an attenuation specification, its pass edges kept as they are.
 *
 *     d = √((10^(A_s/10) − 1)/(10^(A_p/10) − 1)), Ω the selectivity
 *     Butterworth ln d/ln Ω · Chebyshev, both kinds, acosh d/acosh Ω · elliptic K(1/Ω) K′(1/d)/(K′(1/Ω) K(1/d))
 *
 * @param spec the order of a band-pass or band-stop is that of its low-pass prototype, half its number of poles
 * @throws {ProblemError} 'value-not-positive' or 'value-out-of-range' for edges or losses that make no specification
 * @example minimumOrder({ type: 'low-pass', passHz: 1e3, stopHz: 2e3, passDb: 3, stopDb: 20 }).butterworth.order // 4
 * Source: A. I. Zverev, Handbook of Filter Synthesis (1967); A. Antoniou, Digital Filters (1993), from memory.
 */
export function minimumOrder(spec: AttenuationSpec): Record<OrderFamily, OrderEstimate> {
  const ratio = selectivity(spec)
  const discrimination = rippleFactor(spec.stopDb) / rippleFactor(spec.passDb)
  const chebyshev = estimate(Math.acosh(discrimination) / Math.acosh(ratio))
  return {
    butterworth: estimate(Math.log(discrimination) / Math.log(ratio)),
    chebyshev1: chebyshev,
    chebyshev2: { ...chebyshev },
    elliptic: estimate(periodRatio(1 / discrimination) / periodRatio(1 / ratio)),
  }
}

/**
 * Stop edge of the low-pass prototype whose pass edge is 1. Of a band filter's two stop edges the harder one decides.
 * @throws {ProblemError} as `minimumOrder`
 */
export function selectivity(spec: AttenuationSpec): number {
  requireSpec(spec)
  if (spec.type === 'low-pass') return spec.stopHz / spec.passHz
  if (spec.type === 'high-pass') return spec.passHz / spec.stopHz
  const [from, to] = spec.passHz
  const bandPass = spec.stopHz.map((hz) => Math.abs((hz - (from * to) / hz) / (to - from)))
  return spec.type === 'band-pass' ? Math.min(...bandPass) : Math.min(...bandPass.map((x) => 1 / x))
}

/**
 * Pass edges of a band-stop moved towards the stop band until both stop edges are equally hard, p₁ p₂ = s₁ s₂. A filter
 * with these edges keeps the specification too, and no other choice needs a lower order.
 *
 * @returns hertz
 * @throws {ProblemError} as `minimumOrder`
 */
export function evenPassEdges(spec: BandStopSpec): BandEdges {
  requireSpec(spec)
  const [from, to] = spec.passHz
  const square = spec.stopHz[0] * spec.stopHz[1]
  return from * to < square ? [square / to, to] : [from, square / from]
}

const estimate = (realOrder: number): OrderEstimate => ({
  order: Math.max(1, Math.ceil(realOrder * (1 - ROUNDING))),
  realOrder,
})

/** K′(k)/K(k), by the two means. */
function periodRatio(k: number): number {
  const { complement } = modulusOf(k)
  return arithmeticGeometricMean(1, complement) / arithmeticGeometricMean(1, k)
}

function requireSpec(spec: AttenuationSpec) {
  const { passDb, stopDb } = spec
  for (const [name, values] of Object.entries({
    passHz: [spec.passHz].flat(),
    stopHz: [spec.stopHz].flat(),
    passDb,
    stopDb,
  }))
    for (const value of [values].flat())
      if (!(value > 0 && Number.isFinite(value)))
        throw new ProblemError('value-not-positive', `${name} is ${value}; a number above zero would do.`, {
          pointer: `#/${name}`,
        })
  if (stopDb > MAX_SPEC_DB) throw outOfRange('stopDb', `stopDb is ${stopDb} dB; up to ${MAX_SPEC_DB} dB would do.`)
  if (stopDb <= passDb)
    throw outOfRange(
      'stopDb',
      `The stop band loses ${stopDb} dB, the pass band up to ${passDb} dB; it has to lose more.`,
    )
  const edges = edgesUpwards(spec)
  if (edges.every((hz, i) => i === 0 || edges[i - 1]!.hz < hz.hz)) return
  const wanted = edges.map(({ name }) => name).join(' < ')
  throw outOfRange('stopHz', `A ${spec.type} needs ${wanted}; it has ${edges.map(({ hz }) => hz).join(', ')} Hz.`)
}

function edgesUpwards(spec: AttenuationSpec): { name: string; hz: number }[] {
  if (spec.type === 'low-pass' || spec.type === 'high-pass') {
    const pass = { name: 'the pass edge', hz: spec.passHz }
    const stop = { name: 'the stop edge', hz: spec.stopHz }
    return spec.type === 'low-pass' ? [pass, stop] : [stop, pass]
  }
  const [pass1, pass2] = spec.passHz.map((hz, i) => ({ name: i ? 'the upper pass edge' : 'the lower pass edge', hz }))
  const [stop1, stop2] = spec.stopHz.map((hz, i) => ({ name: i ? 'the upper stop edge' : 'the lower stop edge', hz }))
  return spec.type === 'band-pass' ? [stop1!, pass1!, pass2!, stop2!] : [pass1!, stop1!, stop2!, pass2!]
}

const outOfRange = (field: string, detail: string) =>
  new ProblemError('value-out-of-range', detail, { pointer: `#/${field}` })
