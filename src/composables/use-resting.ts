import { onScopeDispose, shallowRef, watch, type Ref, type ShallowRef } from 'vue'

/**
 * Follows a source once it has rested: a scale that jumped with every half-typed value could not be read.
 * @param same whether two values need no change
 */
export function useResting<T>(source: Ref<T>, same: (a: T, b: T) => boolean, afterMs = 250): Readonly<ShallowRef<T>> {
  const resting = shallowRef(source.value) as ShallowRef<T>
  let timer: ReturnType<typeof setTimeout> | undefined
  watch(source, (now) => {
    clearTimeout(timer)
    if (!same(now, resting.value)) timer = setTimeout(() => (resting.value = source.value), afterMs)
  })
  onScopeDispose(() => clearTimeout(timer))
  return resting
}
