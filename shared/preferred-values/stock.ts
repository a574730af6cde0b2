import type { PassiveKind } from '../circuit/part'
import { isPreferred, preferredBetween } from './lookup'
import type { SeriesName } from './series'

/** One line of what the stores hold: a series over a range. Tolerance as a fraction, drift per kelvin. */
export interface StockLine {
  kind: PassiveKind
  class: string
  series: SeriesName
  from: number
  to: number
  tolerance: number
  driftPerKelvin: number
}

/** The house stock of the demonstration shelf (invented). */
export const HOUSE_STOCK: readonly StockLine[] = [
  { kind: 'resistor', class: 'thin film', series: 'E96', from: 10, to: 1e6, tolerance: 0.01, driftPerKelvin: 25e-6 },
  {
    kind: 'resistor',
    class: 'thin film',
    series: 'E192',
    from: 100,
    to: 100e3,
    tolerance: 0.001,
    driftPerKelvin: 15e-6,
  },
  { kind: 'resistor', class: 'thick film', series: 'E24', from: 1, to: 10e6, tolerance: 0.05, driftPerKelvin: 200e-6 },
  { kind: 'capacitor', class: 'C0G', series: 'E24', from: 10e-12, to: 10e-9, tolerance: 0.02, driftPerKelvin: 30e-6 },
  { kind: 'capacitor', class: 'C0G', series: 'E12', from: 10e-12, to: 100e-9, tolerance: 0.05, driftPerKelvin: 30e-6 },
  { kind: 'capacitor', class: 'film', series: 'E12', from: 1e-9, to: 1e-6, tolerance: 0.05, driftPerKelvin: 200e-6 },
  { kind: 'capacitor', class: 'film', series: 'E6', from: 1e-9, to: 10e-6, tolerance: 0.05, driftPerKelvin: 200e-6 },
  {
    kind: 'inductor',
    class: 'shielded ferrite',
    series: 'E12',
    from: 1e-6,
    to: 100e-3,
    tolerance: 0.1,
    driftPerKelvin: 300e-6,
  },
]

/** Widest range over which any line holds a kind. */
const rangeOf = (kind: PassiveKind) => {
  const lines = HOUSE_STOCK.filter((line) => line.kind === kind)
  return { from: Math.min(...lines.map((line) => line.from)), to: Math.max(...lines.map((line) => line.to)) }
}

/**
 * Values of a series that a part may take, inside its own range and the range of the stores, ascending.
 * A coarser series is contained in what a finer line holds only where the value is the same; the series asked decides.
 */
export function stockValues(kind: PassiveKind, series: SeriesName, from = 0, to = Infinity): number[] {
  const range = rangeOf(kind)
  return preferredBetween(Math.max(from, range.from), Math.min(to, range.to), series)
}

/** True when some line of the stock holds the value; with a series, when a line of this kind spans it in that series. */
export function inStock(value: number, kind: PassiveKind, series?: SeriesName): boolean {
  const slack = 1e-12
  return HOUSE_STOCK.some(
    (line) =>
      line.kind === kind &&
      value >= line.from * (1 - slack) &&
      value <= line.to * (1 + slack) &&
      isPreferred(value, series ?? line.series),
  )
}
