import { onScopeDispose, shallowRef, watch, type Ref, type ShallowRef } from 'vue'

const LATER_MS = 200

/**
 * Follows a source at once while the element is in view, and a moment later while it is not: what nobody sees takes no
 * part of the frame in which a value is typed. To be called inside an effect scope, which ends it.
 */
export function followWhenSeen<T>(element: Element, source: Ref<T>): Readonly<ShallowRef<T>> {
  const seen = shallowRef(source.value) as ShallowRef<T>
  let isInView = true
  let timer: ReturnType<typeof setTimeout> | undefined
  const catchUp = () => {
    clearTimeout(timer)
    timer = undefined
    seen.value = source.value
  }
  const observer = new IntersectionObserver((entries) => {
    isInView = entries.at(-1)!.isIntersecting
    if (isInView) catchUp()
  })
  observer.observe(element)
  watch(source, () => {
    if (isInView) catchUp()
    else timer ??= setTimeout(catchUp, LATER_MS)
  })
  onScopeDispose(() => {
    observer.disconnect()
    clearTimeout(timer)
  })
  return seen
}
