import type { Database } from '../database'
import type { PeopleRepository } from '../people'
import { signInAttempts } from './attempts'
import type { PasswordHasher } from './password-hash'
import { signInRoutes } from './routes'
import { signInService } from './service'
import { sessionHandlers } from './session-handlers'
import { sessionRepository } from './session-repository'
import { DatabaseSessionStore, type SessionLimits } from './session-store'

export { BCRYPT_COST, passwordHasher, type PasswordHasher } from './password-hash'

interface Needs {
  database: Database
  databaseName: string
  people: PeopleRepository
  hasher: PasswordHasher
  limits: SessionLimits
  secret: string
  overHttps: boolean
  now: () => Date
  onTouchFailure: (error: unknown) => void
}

/** Sign-in as a whole: routes, the session handlers for the other routes, and the sweeping of ended sessions. */
export function signInFeature(needs: Needs) {
  const { database, people, hasher, limits, now } = needs
  const { queries } = database
  const attempts = signInAttempts(database.pool, needs.databaseName)
  const store = new DatabaseSessionStore({ queries, limits, now, onTouchFailure: needs.onTouchFailure })
  const signIn = signInService({ queries, people, hasher, attempts })
  const { handlers, authenticate } = sessionHandlers({ ...needs, signIn, store })
  return {
    session: handlers,
    routes: signInRoutes({ authenticate, overHttps: needs.overHttps }),
    sweep: () => sessionRepository.removeEnded(queries, now(), limits.idleMs),
  }
}
