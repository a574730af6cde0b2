import { ProblemError } from '../problems'
import type { FigureSet } from './figure-set'
import type { ResponseDb } from './response-db'

/** Bounds of a figure, in its unit, either of which may be absent. */
export interface FigureLimit {
  kind: 'figure'
  figure: string
  least?: number
  most?: number
}

/** A level line on the response, held at every frequency computed from fromHz to toHz. */
export interface LineLimit {
  kind: 'line'
  name: string
  fromHz: number
  toHz: number
  leastDb?: number
  mostDb?: number
}

export type YieldLimit = FigureLimit | LineLimit

/** Whether a build keeps one limit, from its figures and its response in dB; what is not defined keeps none. */
export type Keeps = (figures: Float64Array, responseDb: Float64Array) => boolean

/**
 * Prepares a limit.
 * @throws {ProblemError} 'result-unknown' when the figure is not computed; 'value-out-of-range' when no frequency
 *   computed lies under the line
 */
export function limitCheck(limit: YieldLimit, figures: FigureSet, response: ResponseDb | undefined): Keeps {
  if (limit.kind === 'figure') {
    const { figure, least = -Infinity, most = Infinity } = limit
    const slot = figures.names.indexOf(figure)
    if (slot < 0)
      throw new ProblemError('result-unknown', `A limit is set on ${figure}; computed are ${figures.names.join(', ')}.`)
    return (found) => found[slot]! >= least && found[slot]! <= most
  }
  const { name, fromHz, toHz, leastDb = -Infinity, mostDb = Infinity } = limit
  const slots = Array.from(response?.frequenciesHz ?? []).flatMap((f, k) => (f >= fromHz && f <= toHz ? [k] : []))
  if (slots.length === 0)
    throw new ProblemError(
      'value-out-of-range',
      `The limit line ${name} runs from ${fromHz} Hz to ${toHz} Hz, where no frequency is computed.`,
    )
  return (_, db) => slots.every((slot) => db[slot]! >= leastDb && db[slot]! <= mostDb)
}
