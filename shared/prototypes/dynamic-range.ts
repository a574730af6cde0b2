import { sectionMagnitude, type Section } from './sections'

/** Up to this number every order of a cascade is looked at. */
const EXACT_SECTIONS = 10
const BAND_POINTS = 160
const DECADES_BEYOND = 2

/** A band that signals lie in, rad/s; a lower edge of 0 means from DC, an upper of Infinity to the highest. */
export interface PassBand {
  fromRadPerSec: number
  toRadPerSec: number
}

/**
 * The sections in the order that keeps the most dynamic range: after each section the response from the input has a
 * largest value at any frequency, which sets the overload, and a smallest one in the pass band, which sets the noise;
 * the order chosen has the least worst ratio of the two, and among such orders the least product of all ratios.
 * Up to ten sections all orders are compared; beyond, each place takes the section that costs least there.
 *
 * @param sections zeros already paired
 * @param passBands rad/s; two of a band-stop
 * @returns the same sections, first at the input
 * Source: E. Lueder, Bell Syst. Tech. J. 49 (1970) 23, from memory, for the measure; the search goes over subsets, as a
 * partial cascade's response does not depend on its order.
 */
export function orderForDynamicRange(sections: readonly Section[], passBands: readonly PassBand[]): Section[] {
  const grid = frequencies(sections, passBands)
  const curves = sections.map((section) => grid.map((radPerSec) => Math.log(sectionMagnitude(section, radPerSec))))
  const inBand = grid.map((x) =>
    passBands.some((band) => x >= band.fromRadPerSec * (1 - 1e-12) && x <= band.toRadPerSec * (1 + 1e-12)),
  )
  const order = sections.length <= EXACT_SECTIONS ? bestOrder(curves, inBand) : greedyOrder(curves, inBand)
  return order.map((i) => sections[i]!)
}

/** ln of largest anywhere over smallest in the band. */
function spread(curve: ArrayLike<number>, inBand: readonly boolean[]): number {
  let largest = -Infinity
  let smallest = Infinity
  for (let i = 0; i < curve.length; i++) {
    largest = Math.max(largest, curve[i]!)
    if (inBand[i] && curve[i]! < smallest) smallest = curve[i]!
  }
  return largest - smallest
}

function bestOrder(curves: readonly number[][], inBand: readonly boolean[]): number[] {
  const sets = 1 << curves.length
  const curveOf: Float64Array[] = [new Float64Array(inBand.length)]
  const worst = new Float64Array(sets)
  const sum = new Float64Array(sets)
  const last = new Int32Array(sets)
  for (let set = 1; set < sets; set++) {
    const lowest = 31 - Math.clz32(set & -set)
    curveOf[set] = curveOf[set & (set - 1)]!.map((x, i) => x + curves[lowest]![i]!)
    const here = spread(curveOf[set]!, inBand)
    worst[set] = Infinity
    for (let i = 0; i < curves.length; i++) {
      if (!(set & (1 << i))) continue
      const before = set & ~(1 << i)
      const candidate = Math.max(worst[before]!, here)
      const better = candidate < worst[set]! || (candidate === worst[set] && sum[before]! + here < sum[set]!)
      if (!better) continue
      worst[set] = candidate
      sum[set] = sum[before]! + here
      last[set] = i
    }
  }
  const order: number[] = []
  for (let set = sets - 1; set > 0; set &= ~(1 << last[set]!)) order.unshift(last[set]!)
  return order
}

function greedyOrder(curves: readonly number[][], inBand: readonly boolean[]): number[] {
  const order: number[] = []
  let partial = inBand.map(() => 0)
  while (order.length < curves.length) {
    let best = -1
    let least = Infinity
    curves.forEach((curve, i) => {
      if (order.includes(i)) return
      const cost = spread(
        curve.map((x, k) => x + partial[k]!),
        inBand,
      )
      if (best >= 0 && !(cost < least)) return
      best = i
      least = cost
    })
    order.push(best)
    partial = partial.map((x, k) => x + curves[best]![k]!)
  }
  return order
}

/** Evenly in log over each band and two decades beyond the sections, with every natural frequency and all edges. */
function frequencies(sections: readonly Section[], passBands: readonly PassBand[]): number[] {
  const natural = sections.map(({ omega0 }) => omega0)
  const edges = passBands
    .flatMap(({ fromRadPerSec, toRadPerSec }) => [fromRadPerSec, toRadPerSec])
    .filter((edge) => edge > 0 && Number.isFinite(edge))
  const beyond = 10 ** DECADES_BEYOND
  const from = Math.min(...natural, ...edges) / beyond
  const to = Math.max(...natural, ...edges) * beyond
  const sweep = (a: number, b: number) =>
    Array.from({ length: BAND_POINTS }, (_, i) => a * (b / a) ** (i / (BAND_POINTS - 1)))
  const bands = passBands.flatMap((band) => sweep(Math.max(band.fromRadPerSec, from), Math.min(band.toRadPerSec, to)))
  return [...sweep(from, to), ...bands, ...natural, ...edges]
}
