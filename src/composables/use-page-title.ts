import { toValue, watchEffect, type MaybeRefOrGetter } from 'vue'

/** Titles the window "Name · section · Poleshelf". */
export function usePageTitle(...parts: MaybeRefOrGetter<string | null | undefined>[]): void {
  watchEffect(() => {
    document.title = [...parts.map((part) => toValue(part)), 'Poleshelf'].filter(Boolean).join(' · ')
  })
}
