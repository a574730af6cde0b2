import { describe, expect, it } from 'vitest'
import type { SeriesName } from '#shared/preferred-values/series'
import { evaluated, stageOf, worstErrorOf } from '../../support/stages'
import {
  bestInverting,
  bestMultipleFeedback,
  bestNonInverting,
  bestSallenKey,
  bestWideBand,
  stockOf,
} from './brute-force'

/** Errors nearer than this count as equal. */
const EQUAL = 1e-9

describe('the sizing finds the smallest worst error there is', () => {
  const inverting = stageOf('lp1-inv')
  const all = { Ri: stockOf(inverting, 'Ri'), Rf: stockOf(inverting, 'Rf'), Cf: stockOf(inverting, 'Cf') }

  it.each([
    [2400, -2],
    [1000, -1],
    [159.155, -10],
    [33.3, -3.3],
    [12_345, -7.77],
    [47_000, -0.5],
    [200_000, -25],
    [2, -0.1],
  ])('of all E96 and E12 values of the inverting low-pass, f_c %f Hz and K %f', (fc, k) => {
    const outcome = evaluated(inverting, { targets: { f_c: fc, K: k } })
    expect(worstErrorOf(outcome)).toBeLessThanOrEqual(bestInverting(all, fc, k) + EQUAL)
    for (const [name, values] of Object.entries(all)) expect(values).toContain(outcome.values[name])
  })

  it.each([
    [1000, 4],
    [330, 1.5],
    [8800, 11],
    [20_000, 31.7],
  ])('of all values of the non-inverting low-pass, f_c %f Hz and K %f', (fc, k) => {
    const stage = stageOf('lp1-ni')
    const names = ['R1', 'C1', 'Rg', 'Rf'] as const
    const stock = Object.fromEntries(names.map((name) => [name, stockOf(stage, name)])) as Record<
      (typeof names)[number],
      number[]
    >
    const outcome = evaluated(stage, { targets: { f_c: fc, K: k } })
    expect(worstErrorOf(outcome)).toBeLessThanOrEqual(bestNonInverting(stock, fc, k) + EQUAL)
  })

  it.each([
    [1800, 0.9, -2],
    [1000, 0.7071, -1],
    [25_000, 1.3, -5],
    [60, 0.5773, -1],
  ])('of E12 and E6 values of the multiple-feedback low-pass, f_0 %f Hz, Q %f, K %f', (f0, q, k) => {
    const stage = stageOf('lp2-mfb')
    const series: Record<'R1' | 'R2' | 'R3' | 'C1' | 'C2', SeriesName> = {
      R1: 'E12',
      R2: 'E12',
      R3: 'E12',
      C1: 'E6',
      C2: 'E6',
    }
    const stock = Object.fromEntries(Object.entries(series).map(([name, one]) => [name, stockOf(stage, name, one)]))
    const best = bestMultipleFeedback(stock as Parameters<typeof bestMultipleFeedback>[0], f0, q, k)
    const outcome = evaluated(stage, { targets: { f_0: f0, Q: q, K: k }, series })
    expect(worstErrorOf(outcome)).toBeLessThanOrEqual(best + EQUAL)
  })

  it.each([
    [1000, 0.7071],
    [3300, 0.5],
    [470, 1.3],
    [20_000, 3],
  ])('of E12 and E6 values of the Sallen–Key low-pass, f_0 %f Hz and Q %f', (f0, q) => {
    const stage = stageOf('lp2-sku')
    const series: Record<'R1' | 'R2' | 'C1' | 'C2', SeriesName> = { R1: 'E12', R2: 'E12', C1: 'E6', C2: 'E6' }
    const stock = Object.fromEntries(Object.entries(series).map(([name, one]) => [name, stockOf(stage, name, one)]))
    const best = bestSallenKey(stock as Parameters<typeof bestSallenKey>[0], f0, q)
    expect(worstErrorOf(evaluated(stage, { targets: { f_0: f0, Q: q }, series }))).toBeLessThanOrEqual(best + EQUAL)
  })

  it.each([
    [70, 5000, -10],
    [20, 20_000, -4.7],
    [300, 3400, -1],
  ])('of E12 and E6 values of the wide band-pass, f_1 %f Hz, f_2 %f Hz, K_0 %f', (f1, f2, k) => {
    const stage = stageOf('bp1-wide')
    const series: Record<'Ri' | 'Ci' | 'Rf' | 'Cf', SeriesName> = { Ri: 'E12', Ci: 'E6', Rf: 'E12', Cf: 'E6' }
    const stock = Object.fromEntries(Object.entries(series).map(([name, one]) => [name, stockOf(stage, name, one)]))
    const best = bestWideBand(stock as Parameters<typeof bestWideBand>[0], f1, f2, k)
    expect(worstErrorOf(evaluated(stage, { targets: { f_1: f1, f_2: f2, K_0: k }, series }))).toBeLessThanOrEqual(
      best + EQUAL,
    )
  })
})

describe('the time that a sizing takes', () => {
  // Bounds for an idle machine are 25 ms and 60 ms; these leave room for one shared with other work.
  it.each<[string, Record<string, number>, number]>([
    ['lp1-inv', { f_c: 2400, K: -2 }, 25],
    ['lp2-mfb', { f_0: 1800, Q: 0.9, K: -2 }, 60],
  ])('is short for %s', (code, targets, mostMs) => {
    const stage = stageOf(code)
    const once = () => {
      const from = performance.now()
      evaluated(stage, { targets })
      return performance.now() - from
    }
    for (let k = 0; k < 4; k++) once()
    expect(Math.min(...Array.from({ length: 8 }, once))).toBeLessThan(3 * mostMs)
  })
})
