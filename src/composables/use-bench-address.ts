import { onScopeDispose, watch } from 'vue'
import type { Bench } from './use-bench'
import { stateQuery } from './stage-state'

const AFTER_MS = 200

/**
 * Keeps the address in step with the bench, without an entry in the history for each key: from the first changed value
 * on it names the revision.
 */
export function useBenchAddress(bench: Bench, code: string, revision: number) {
  let timer: ReturnType<typeof setTimeout> | undefined
  const address = () => {
    const query = stateQuery(bench.stage, bench.state).toString()
    const path = `/blocks/${code}/revisions/${revision}`
    return query ? `${path}?${query}` : path
  }
  watch(
    bench.state,
    () => {
      clearTimeout(timer)
      timer = setTimeout(() => history.replaceState(history.state, '', address() + location.hash), AFTER_MS)
    },
    { deep: true },
  )
  onScopeDispose(() => clearTimeout(timer))
  return { address }
}
