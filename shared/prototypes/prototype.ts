import { ProblemError } from '../problems'
import { bessel, besselAsymptote, besselHalfPower } from './bessel'
import { butterworth } from './butterworth'
import { chebyshev1, chebyshev1HalfPower } from './chebyshev1'
import { chebyshev2, chebyshev2HalfPower } from './chebyshev2'
import { elliptic, ellipticHalfPower, ellipticStopEdge } from './elliptic'
import { linkwitzRiley, linkwitzRileyHalfPower } from './linkwitz-riley'
import { scaledInFrequency, type ZeroPoleGain } from './zero-pole-gain'

export const MAX_PROTOTYPE_ORDER = 20

/** Loss at half power, dB: 10 lg 2, not 3. */
export const HALF_POWER_DB = 10 * Math.log10(2)

/** Largest ripple or stop-band loss taken, dB. */
export const MAX_LOSS_DB = 300

export const NORMALISATIONS = [
  'half-power at 1 rad/s',
  'ripple edge at 1 rad/s',
  'stop-band edge at 1 rad/s',
  'phase-normalised (same high-frequency asymptote as Butterworth)',
  'unit group delay at DC',
  'half-amplitude at 1 rad/s',
] as const
export type Normalisation = (typeof NORMALISATIONS)[number]

const [HALF_POWER, RIPPLE_EDGE, STOP_EDGE, ASYMPTOTE, UNIT_DELAY, HALF_AMPLITUDE] = NORMALISATIONS

/** The normalisations of each family, the usual one first. */
export const FAMILY_NORMALISATIONS = {
  butterworth: [HALF_POWER],
  chebyshev1: [RIPPLE_EDGE, HALF_POWER],
  chebyshev2: [STOP_EDGE, HALF_POWER],
  bessel: [HALF_POWER, UNIT_DELAY, ASYMPTOTE],
  elliptic: [RIPPLE_EDGE, HALF_POWER, STOP_EDGE],
  'linkwitz-riley': [HALF_AMPLITUDE, HALF_POWER],
} as const satisfies Record<string, readonly Normalisation[]>

export const PROTOTYPE_FAMILIES = [
  'butterworth',
  'chebyshev1',
  'chebyshev2',
  'bessel',
  'elliptic',
  'linkwitz-riley',
] as const satisfies readonly (keyof typeof FAMILY_NORMALISATIONS)[]
export type PrototypeFamily = (typeof PROTOTYPE_FAMILIES)[number]

export interface PrototypeRequest {
  family: PrototypeFamily
  order: number
  /** The family's usual one when absent. */
  normalisation?: Normalisation
  /** Pass-band ripple, dB; of chebyshev1 and elliptic. */
  rippleDb?: number
  /** Least loss in the stop band, dB; of chebyshev2 and elliptic. */
  stopDb?: number
}

/**
 * Low-pass prototype of a family in one of its normalisations, rad/s.
 *
 * @param request order 1 to 20, even for linkwitz-riley; ripple and stop-band loss where the family has them, the
 *   others being left alone
 * @throws {ProblemError} 'value-out-of-range' for an order, a loss or a normalisation that the family does not have
 * @example lowPassPrototype({ family: 'butterworth', order: 1 }) // { zeros: [], poles: [{ re: -1, im: 0 }], gain: 1 }
 * Source: the module of the family.
 */
export function lowPassPrototype(request: PrototypeRequest): ZeroPoleGain {
  requireOrder(request)
  const normalisation = normalisationOf(request)
  const { order } = request
  const scaled = (filter: ZeroPoleGain, edges: Partial<Record<Normalisation, () => number>>) => {
    const edge = edges[normalisation]
    return edge ? scaledInFrequency(filter, 1 / edge()) : filter
  }
  switch (request.family) {
    case 'butterworth':
      return butterworth(order)
    case 'chebyshev1': {
      const ripple = lossOf(request, 'rippleDb')
      return scaled(chebyshev1(order, ripple), { [HALF_POWER]: () => chebyshev1HalfPower(order, ripple) })
    }
    case 'chebyshev2': {
      const stop = lossOf(request, 'stopDb')
      if (normalisation === HALF_POWER) requireAboveHalfPower(stop)
      return scaled(chebyshev2(order, stop), { [HALF_POWER]: () => chebyshev2HalfPower(order, stop) })
    }
    case 'bessel':
      return scaled(bessel(order), {
        [HALF_POWER]: () => besselHalfPower(order),
        [ASYMPTOTE]: () => besselAsymptote(order),
      })
    case 'elliptic': {
      const ripple = lossOf(request, 'rippleDb')
      const stop = lossOf(request, 'stopDb')
      if (stop <= ripple)
        throw outOfRange(
          'stopDb',
          `The stop band loses ${stop} dB, the pass band up to ${ripple} dB; it has to lose more.`,
        )
      if (normalisation === HALF_POWER) requireAboveHalfPower(stop)
      return scaled(elliptic(order, ripple, stop), {
        [HALF_POWER]: () => ellipticHalfPower(order, ripple, stop),
        [STOP_EDGE]: () => ellipticStopEdge(order, ripple, stop),
      })
    }
    case 'linkwitz-riley':
      return scaled(linkwitzRiley(order), { [HALF_POWER]: () => linkwitzRileyHalfPower(order) })
  }
}

const outOfRange = (field: keyof PrototypeRequest, detail: string) =>
  new ProblemError('value-out-of-range', detail, { pointer: `#/${field}` })

function requireOrder({ family, order }: PrototypeRequest) {
  if (!(Number.isInteger(order) && order >= 1 && order <= MAX_PROTOTYPE_ORDER))
    throw outOfRange('order', `The order is ${order}; a whole number from 1 to ${MAX_PROTOTYPE_ORDER} would do.`)
  if (family === 'linkwitz-riley' && order % 2)
    throw outOfRange('order', `Linkwitz–Riley of order ${order}: it is a Butterworth squared, so its order is even.`)
}

function normalisationOf({ family, normalisation }: PrototypeRequest): Normalisation {
  const known: readonly Normalisation[] = FAMILY_NORMALISATIONS[family]
  if (normalisation === undefined) return known[0]!
  if (known.includes(normalisation)) return normalisation
  const detail = `“${normalisation}” is no normalisation of ${family}; ${known.map((one) => `“${one}”`).join(', ')} would do.`
  throw outOfRange('normalisation', detail)
}

function lossOf(request: PrototypeRequest, field: 'rippleDb' | 'stopDb'): number {
  const lossDb = request[field]
  const what = field === 'rippleDb' ? 'pass-band ripple' : 'stop-band loss'
  if (lossDb === undefined) throw outOfRange(field, `${request.family} needs its ${what} in dB.`)
  if (!(lossDb >= 1e-6 && lossDb <= MAX_LOSS_DB))
    throw outOfRange(field, `A ${what} of ${lossDb} dB; from 0.000001 dB to ${MAX_LOSS_DB} dB would do.`)
  return lossDb
}

function requireAboveHalfPower(stopDb: number) {
  if (stopDb > HALF_POWER_DB) return
  throw outOfRange('stopDb', `A stop-band loss of ${stopDb} dB never reaches half power; above 3.0103 dB would do.`)
}
