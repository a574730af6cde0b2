import type { CsvCell } from './write-csv'
import { csvText } from './write-csv'

/** A response at one output; all of shape [n], one a frequency. */
export interface ResponseCurve {
  name: string
  re: ArrayLike<number>
  im: ArrayLike<number>
  /** Unwrapped, rad. */
  phaseRad: ArrayLike<number>
}

/**
 * Responses as CSV: a line a frequency; of each curve real and imaginary part (V/V), gain in dB and unwrapped phase. Where
 * the gain is 0 its dB are left empty, and so is what is no finite number.
 * @param frequenciesHz Hz, shape [n]
 */
export const responseCsv = (frequenciesHz: ArrayLike<number>, curves: readonly ResponseCurve[]): string =>
  csvText([
    [
      'frequencyHz',
      ...curves.flatMap(({ name }) => ['re', 'im', 'gainDb', 'phaseRad'].map((what) => `${name} ${what}`)),
    ],
    ...Array.from(frequenciesHz, (frequencyHz, k): CsvCell[] => [
      frequencyHz,
      ...curves.flatMap(({ re, im, phaseRad }) => {
        const gainDb = 20 * Math.log10(Math.hypot(re[k]!, im[k]!))
        return [re[k]!, im[k]!, gainDb, phaseRad[k]!].map((x) => (Number.isFinite(x) ? x : null))
      }),
    ]),
  ])
