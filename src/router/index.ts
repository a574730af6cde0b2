import { createRouter, createWebHistory, type RouteLocationNormalized } from 'vue-router'
import { useSession } from '../stores/session'
import { isMissingFile, pageCameUp, reloadOnce } from './new-version'
import { routes } from './routes'

/** Routes with their guard: pages that need it wait for sign-in, and are gone back to after it. */
export default () => {
  const router = createRouter({
    history: createWebHistory(),
    routes,
    scrollBehavior(to, from, saved) {
      if (saved) return saved
      if (to.hash) return { el: `[id="${CSS.escape(decodeURIComponent(to.hash.slice(1)))}"]` }
      return to.path === from.path ? false : { top: 0 }
    },
  })

  router.beforeEach(async (to) => {
    const session = useSession()
    if (session.isSignedIn) return true
    const isSignedIn = await session.settle().catch(() => null)
    if (to.meta.isPublic || isSignedIn) return true
    // Without an answer nobody knows: the sign-in page says what is the matter.
    return { path: '/sign-in', query: nextOf(to) }
  })
  router.onError((error, to) => {
    if (isMissingFile(error)) reloadOnce(to.fullPath)
  })
  router.afterEach((_to, _from, failure) => {
    if (!failure) pageCameUp()
  })
  return router
}

const nextOf = (to: RouteLocationNormalized) => (to.fullPath === '/' ? {} : { next: to.fullPath })
