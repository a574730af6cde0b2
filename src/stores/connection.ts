import { defineStore } from 'pinia'
import { computed, ref } from 'vue'

export type ConnectionState = 'fine' | 'lost' | 'database away'

const LOOK_EVERY_MS = 2500

/**
 * Whether the server answers. While it does not, its readiness is asked again and again, and whoever waits is told
 * when it is back.
 */
export const useConnection = defineStore('connection', () => {
  const state = ref<ConnectionState>('fine')
  const waiting = new Set<() => void>()
  let timer: ReturnType<typeof setTimeout> | undefined

  const sentence = computed(() => SENTENCES[state.value])

  function answered(): void {
    if (state.value === 'lost') back()
  }

  function unreachable(): void {
    state.value = 'lost'
    lookAgain()
  }

  function databaseAway(): void {
    state.value = 'database away'
    lookAgain()
  }

  /** Calls back each time the server answers again; returns how to stop that. */
  function onBack(then: () => void): () => void {
    waiting.add(then)
    return () => void waiting.delete(then)
  }

  function back(): void {
    clearTimeout(timer)
    timer = undefined
    if (state.value === 'fine') return
    state.value = 'fine'
    for (const then of waiting) then()
  }

  function lookAgain(): void {
    timer ??= setTimeout(async () => {
      timer = undefined
      const ready = await fetch('/health/ready', { cache: 'no-store' }).catch(() => null)
      if (ready?.ok) return back()
      state.value = ready?.status === 503 ? 'database away' : 'lost'
      lookAgain()
    }, LOOK_EVERY_MS)
  }

  window.addEventListener('offline', unreachable)
  return { state, sentence, answered, unreachable, databaseAway, onBack }
})

const SENTENCES: Record<ConnectionState, string> = {
  fine: '',
  lost: 'The connection to the server is lost. What you typed is kept; this page goes on by itself once it is back.',
  'database away': 'The database does not answer. What you typed is kept; this page goes on by itself once it does.',
}
