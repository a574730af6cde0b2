import { del, get, set } from 'idb-keyval'
import { onScopeDispose, shallowRef, watch } from 'vue'
import { useSession } from '../stores/session'
import { emptyState, isEmptyState, type BenchState } from './stage-state'
import type { Bench } from './use-bench'

interface Unfinished {
  revision: number
  state: BenchState
  at: string
}

const AFTER_MS = 600

/** The unfinished sizing of each block, kept in this browser for the person and offered when they come back. */
export function useUnfinished(bench: Bench, code: string, revision: number) {
  const session = useSession()
  const key = `unfinished:${session.me?.email ?? ''}:${code}`
  const offered = shallowRef<Unfinished | null>(null)
  /** Said when this browser keeps nothing: private windows and full disks refuse. */
  const sentence = shallowRef<string | null>(null)
  let timer: ReturnType<typeof setTimeout> | undefined
  let isSettled = !bench.isUntouched.value

  void get<Unfinished>(key)
    .then((found) => {
      if (!isSettled && found && !isEmptyState(found.state)) offered.value = found
    })
    .catch(
      () =>
        (sentence.value = 'This browser keeps nothing for this page, so an unfinished sizing is not offered later.'),
    )

  const keep = () => {
    const state = structuredClone({ ...emptyState(), ...JSON.parse(JSON.stringify(bench.state)) }) as BenchState
    const work = isEmptyState(state)
      ? del(key)
      : set(key, { revision, state, at: new Date().toISOString() } satisfies Unfinished)
    work.catch(() => (sentence.value = 'This browser cannot keep the unfinished sizing; the address holds it.'))
  }

  const stop = watch(
    bench.state,
    () => {
      isSettled = true
      offered.value = null
      clearTimeout(timer)
      timer = setTimeout(keep, AFTER_MS)
    },
    { deep: true },
  )
  const keepNow = () => {
    if (document.visibilityState !== 'hidden' || timer === undefined) return
    clearTimeout(timer)
    keep()
  }
  document.addEventListener('visibilitychange', keepNow)
  onScopeDispose(() => {
    document.removeEventListener('visibilitychange', keepNow)
    clearTimeout(timer)
  })

  return {
    offered,
    sentence,
    takeUp() {
      if (offered.value) bench.replace(offered.value.state)
      offered.value = null
    },
    async forget() {
      offered.value = null
      await del(key).catch(() => {})
    },
    /** After saving: nothing is unfinished any more. */
    async finish() {
      stop()
      clearTimeout(timer)
      await del(key).catch(() => {})
    },
  }
}
