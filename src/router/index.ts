import { createRouter, createWebHistory, type RouteLocationNormalized } from 'vue-router'
import { useSession } from '../stores/session'
import { ownPath } from './own-path'
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
    const isSignedIn = to.meta.isPublic && session.isSettled ? session.isSignedIn : await settled(session)
    if (isSignedIn && to.path === '/sign-in') return ownPath(to.query.next)
    if (isSignedIn || to.meta.isPublic) return true
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

/** Whether somebody is signed in; null while the server does not answer. */
const settled = (session: ReturnType<typeof useSession>) => session.settle().catch(() => null)

const nextOf = (to: RouteLocationNormalized) => (to.fullPath === '/' ? {} : { next: to.fullPath })
