import type { Sizing } from '#shared/contracts/sizings'
import type { SeriesName } from '#shared/preferred-values/series'
import { ENGINE_VERSION, type Stage } from '#shared/stage/index'
import { stateQuery, type BenchState } from '../../composables/stage-state'
import { GOOD_ENOUGH } from '../../composables/use-bench'

/**
 * The bench state that shows the stored values. What was held stays held and the rest is solved again, as long as the
 * bench solves it as the sizing was; otherwise every part is held, so that no value moves.
 */
export function benchStateOf(sizing: Sizing): BenchState {
  const { outcome, asked, conditions, engineVersion } = sizing
  const isSolvedAlike = engineVersion === ENGINE_VERSION && asked.goodEnough === GOOD_ENOUGH
  const held = Object.entries(outcome.parts).filter(([, part]) => part.state === 'held' || !isSolvedAlike)
  const targets = Object.entries(outcome.results).filter(([, result]) => result.target !== undefined)
  return {
    held: Object.fromEntries(held.map(([name, part]) => [name, part.value])),
    targets: Object.fromEntries(targets.map(([name, result]) => [name, result.target!])),
    series: { ...asked.series } as Record<string, SeriesName>,
    conditions: { ...conditions },
  }
}

/** Address of the bench with the stored values, on the sizing's revision or on another. */
export function benchAddress(sizing: Sizing, stage: Stage | null, revision = sizing.titleBlock.revision): string {
  const query = stage ? stateQuery(stage, benchStateOf(sizing)).toString() : ''
  return `/blocks/${sizing.titleBlock.code}/revisions/${revision}${query && `?${query}`}`
}
