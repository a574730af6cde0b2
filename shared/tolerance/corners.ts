import type { FigureSet } from './figure-set'
import { slopesOf } from './sensitivities'
import type { Spread } from './spread'
import { nominalValues, requireSpreads } from './spread'

/** Up to so many designators with a tolerance, every corner is computed. */
export const ALL_CORNERS_MOST = 12
/** More are never asked for: a million corners. */
const ALL_CORNERS_LIMIT = 20

/** −1: part·(1 − tolerance); +1: part·(1 + tolerance); 0: a part without tolerance. */
export type CornerSigns = Record<string, -1 | 0 | 1>

export interface FigureCorners {
  nominal: number
  /** Least and greatest of the signed figure over the corners; NaN when it is defined at none. */
  least: number
  most: number
  leastAt: CornerSigns
  mostAt: CornerSigns
  /** Corners at which the figure is not defined, of those computed. */
  undefinedCorners: number
}

export interface Corners {
  /** `sensitivity-signs`: two corners a figure, chosen by the signs of its slopes; exact for monotonic figures. */
  method: 'all-corners' | 'sensitivity-signs'
  /** Designators that have a tolerance. */
  parts: number
  figures: Record<string, FigureCorners>
  /** What was computed, as a sentence. */
  sentence: string
}

/**
 * Least and greatest of figures over the corners of the tolerances, the nominal values not counted.
 * @param allMost number of designators up to which all 2ⁿ corners are computed, 20 at most
 * @throws {ProblemError} as requireSpreads
 */
export function corners(spreads: readonly Spread[], figures: FigureSet, allMost = ALL_CORNERS_MOST): Corners {
  requireSpreads(spreads)
  const moving = spreads.flatMap(({ tolerance }, slot) => (tolerance > 0 ? [slot] : []))
  const values = nominalValues(spreads)
  const nominal = new Float64Array(figures.names.length)
  figures.evaluate(values, nominal)
  const found = figures.names.map((_, f) => new Extremes(nominal[f]!))
  const signs = new Int8Array(spreads.length)
  const out = new Float64Array(figures.names.length)
  const compute = () => {
    spreads.forEach(({ nominal: held, tolerance }, p) => (values[p] = held * (1 + signs[p]! * tolerance)))
    figures.evaluate(values, out)
  }
  const all = moving.length <= Math.min(allMost, ALL_CORNERS_LIMIT)
  if (all) {
    for (let corner = 0; corner < 2 ** moving.length; corner++) {
      moving.forEach((slot, bit) => (signs[slot] = (corner >> bit) & 1 ? 1 : -1))
      compute()
      found.forEach((one, f) => one.take(out[f]!, signs))
    }
  } else {
    const { slopes } = slopesOf(spreads, figures)
    found.forEach((one, f) => {
      for (const side of [-1, 1]) {
        moving.forEach((slot) => (signs[slot] = slopes[slot]![f]! < 0 ? -side : side))
        compute()
        one.take(out[f]!, signs)
      }
    })
  }
  const parts = moving.length
  return {
    method: all ? 'all-corners' : 'sensitivity-signs',
    parts,
    figures: Object.fromEntries(figures.names.map((name, f) => [name, found[f]!.result(spreads)])),
    sentence: all
      ? `Least and greatest over all ${2 ** parts} corners of ${parts} parts.`
      : `Least and greatest at the two corners that the signs of the sensitivities to ${parts} parts point to; ` +
        'a figure that does not rise or fall throughout may go beyond them.',
  }
}

class Extremes {
  private least = NaN
  private most = NaN
  private leastAt = new Int8Array(0)
  private mostAt = new Int8Array(0)
  private undefinedCorners = 0
  constructor(private readonly nominal: number) {}

  take(value: number, signs: Int8Array) {
    if (!Number.isFinite(value)) {
      this.undefinedCorners++
      return
    }
    if (!(value >= this.least)) {
      this.least = value
      this.leastAt = signs.slice()
    }
    if (!(value <= this.most)) {
      this.most = value
      this.mostAt = signs.slice()
    }
  }

  result(spreads: readonly Spread[]): FigureCorners {
    const named = (at: Int8Array) =>
      Object.fromEntries(spreads.map(({ ref }, p) => [ref, (at[p] ?? 0) as -1 | 0 | 1] as const))
    const { nominal, least, most, undefinedCorners } = this
    return { nominal, least, most, leastAt: named(this.leastAt), mostAt: named(this.mostAt), undefinedCorners }
  }
}
