import { ProblemError } from '../problems'
import type { Draws } from './draw'
import { buildDrawer, requireDraws } from './draw'
import type { FigureSet } from './figure-set'
import type { YieldLimit } from './limits'
import { limitCheck } from './limits'
import type { ResponseDb } from './response-db'
import type { Spread } from './spread'
import { nominalValues, requireSpreads } from './spread'
import type { Percentile, SampleStatistics } from './statistics'
import { PERCENTILES, percentilesInPlace, sampleStatistics } from './statistics'
import type { Share } from './wilson'
import { wilsonShare } from './wilson'
import { yieldSentence } from './yield-sentence'

/** What is built many times over, and what is asked of each build. */
export interface Study {
  spreads: readonly Spread[]
  figures: FigureSet
  response?: ResponseDb
  limits?: readonly YieldLimit[]
}

export interface ResponseBands {
  frequenciesHz: Float64Array
  nominalDb: Float64Array
  /** dB at each frequency: the plot shows 5, 50 and 95 %, and 1 and 99 % on demand. */
  percentilesDb: Record<Percentile, Float64Array>
}

export interface Yield {
  /** Builds that keep all limits. */
  all: Share
  byLimit: { limit: YieldLimit; share: Share }[]
  sentence: string
}

export interface MonteCarloResult {
  draws: Draws
  figures: Record<string, SampleStatistics & { nominal: number }>
  bands?: ResponseBands
  yield?: Yield
}

export interface Progress {
  buildsDone: number
  builds: number
}

/** Most numbers kept at once: 256 MB. */
const NUMBERS_MOST = 32_000_000
const CHUNK_BUILDS = 200

/**
 * Monte Carlo over the tolerances, a chunk at a time: it yields progress after each chunk, and whoever runs it stops by
 * not asking for more. The result is the same whatever the chunk, and the same for the same seed everywhere.
 * @param chunkBuilds builds between two reports
 * @returns (at the end) statistics by figure, response bands, yield
 * @throws {ProblemError} 'value-out-of-range', 'result-unknown', as requireSpreads, requireDraws and limitCheck
 */
export function* monteCarlo(
  study: Study,
  options: Partial<Draws> & { seed: number },
  chunkBuilds = CHUNK_BUILDS,
): Generator<Progress, MonteCarloResult> {
  const { spreads, figures, response, limits = [] } = study
  requireSpreads(spreads)
  const draws = requireDraws(options)
  const { builds } = draws
  const checks = limits.map((limit) => limitCheck(limit, figures, response))
  const points = response?.names.length ?? 0
  requireRoom(builds, figures.names.length, points)
  const samples = figures.names.map(() => new Float64Array(builds))
  const levels = Array.from({ length: points }, () => new Float64Array(builds))
  const kept = new Array<number>(checks.length).fill(0)
  let keptAll = 0

  const values = nominalValues(spreads)
  const found = new Float64Array(figures.names.length)
  const db = new Float64Array(points)
  const compute = () => {
    figures.evaluate(values, found)
    response?.evaluate(values, db)
  }
  compute()
  const [nominal, nominalDb] = [found.slice(), db.slice()]

  const draw = buildDrawer(spreads, draws.distribution, draws.seed)
  for (let build = 0; build < builds; build++) {
    draw(values)
    compute()
    for (let f = 0; f < samples.length; f++) samples[f]![build] = found[f]!
    for (let k = 0; k < points; k++) levels[k]![build] = db[k]!
    let all = true
    for (let c = 0; c < checks.length; c++) {
      if (checks[c]!(found, db)) kept[c]!++
      else all = false
    }
    if (all) keptAll++
    if ((build + 1) % chunkBuilds === 0 || build + 1 === builds) yield { buildsDone: build + 1, builds }
  }

  const result: MonteCarloResult = {
    draws,
    figures: Object.fromEntries(
      figures.names.map((name, f) => [name, { nominal: nominal[f]!, ...sampleStatistics(samples[f]!) }]),
    ),
  }
  if (response) {
    const percentilesDb = bandsOf(points)
    for (let k = 0; k < points; k++) {
      const found = percentilesInPlace(levels[k]!)
      for (const p of PERCENTILES) percentilesDb[p][k] = found[p]
      yield { buildsDone: builds, builds }
    }
    result.bands = { frequenciesHz: response.frequenciesHz, nominalDb, percentilesDb }
  }
  if (checks.length > 0) {
    const all = wilsonShare(keptAll, builds)
    const byLimit = limits.map((limit, c) => ({ limit, share: wilsonShare(kept[c]!, builds) }))
    result.yield = { all, byLimit, sentence: yieldSentence(all, draws) }
  }
  return result
}

/** Monte Carlo in one go. @throws {ProblemError} as monteCarlo */
export function monteCarloAtOnce(study: Study, options: Partial<Draws> & { seed: number }): MonteCarloResult {
  const run = monteCarlo(study, options)
  for (;;) {
    const step = run.next()
    if (step.done) return step.value
  }
}

const bandsOf = (points: number) =>
  Object.fromEntries(PERCENTILES.map((p) => [p, new Float64Array(points)])) as Record<Percentile, Float64Array>

function requireRoom(builds: number, figures: number, points: number) {
  if (builds * (figures + points) <= NUMBERS_MOST) return
  throw new ProblemError(
    'value-out-of-range',
    `${builds} builds with ${figures} figures and ${points} frequencies are too many at once; ` +
      `${Math.floor(NUMBERS_MOST / (figures + points))} builds would do.`,
  )
}
