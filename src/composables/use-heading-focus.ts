import { onScopeDispose } from 'vue'
import { useRouter } from 'vue-router'

const WAIT_MS = 8000
/** The heading of a page that is there; that of one still loading is passed by. */
const HEADING = 'main h1:not([data-loading])'

/**
 * After a change of page the heading takes the focus, so that a screen reader says where one is and Tab goes on from
 * there. Pages that still load get it when their heading comes, unless the person has gone elsewhere meanwhile.
 */
export function useHeadingFocus(): void {
  let observer: MutationObserver | undefined
  let timer: ReturnType<typeof setTimeout> | undefined
  const stop = () => (observer?.disconnect(), clearTimeout(timer))

  const focusHeading = (): boolean => {
    const heading = document.querySelector<HTMLElement>(HEADING)
    if (!heading) return false
    heading.tabIndex = -1
    heading.focus({ preventScroll: true })
    return true
  }

  const stopListening = useRouter().afterEach((to, from, failure) => {
    if (failure || to.path === from.path || from.matched.length === 0) return
    stop()
    const before = document.activeElement
    const old = document.querySelector(HEADING)
    observer = new MutationObserver(() => {
      const isElsewhere = document.activeElement !== document.body && document.activeElement !== before
      const heading = document.querySelector(HEADING)
      if (isElsewhere) stop()
      else if (heading && (heading !== old || !old?.isConnected)) if (focusHeading()) stop()
    })
    observer.observe(document.body, { childList: true, subtree: true })
    timer = setTimeout(stop, WAIT_MS)
  })
  onScopeDispose(() => (stop(), stopListening()))
}
