import type { PassiveKind } from '../circuit/part'
import { isPreferred, preferredBetween } from './lookup'
import type { SeriesName } from './series'

/** Limits of a line are met by values that differ from them in the last digits of a double. */
const SLACK = 1e-12

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

/** The stores hold a value when a line of its kind spans it and has it in its series. */
const holds = (line: StockLine, value: number): boolean =>
  value >= line.from * (1 - SLACK) && value <= line.to * (1 + SLACK) && isPreferred(value, line.series)

/**
 * Values of a series that the stores hold for a kind of part, inside the part's own range, ascending. Where a line
 * holds another series, the values that the two share count: of E24 capacitors above 10 nF, those that are in E12 too.
 * @param from in ohm, farad or henry
 * @example stockValues('capacitor', 'E6', 1e-9, 4e-9) // [1e-9, 1.5e-9, 2.2e-9, 3.3e-9]
 */
export function stockValues(kind: PassiveKind, series: SeriesName, from = 0, to = Infinity): number[] {
  const lines = HOUSE_STOCK.filter((line) => line.kind === kind)
  const least = Math.max(from, Math.min(...lines.map((line) => line.from)))
  const most = Math.min(to, Math.max(...lines.map((line) => line.to)))
  if (!(least <= most * (1 + SLACK))) return []
  return preferredBetween(least, most, series).filter((value) => lines.some((line) => holds(line, value)))
}

/** True when the stores hold the value for this kind of part and, when a series is given, it belongs to that series. */
export const inStock = (value: number, kind: PassiveKind, series?: SeriesName): boolean =>
  (series === undefined || isPreferred(value, series)) &&
  HOUSE_STOCK.some((line) => line.kind === kind && holds(line, value))
