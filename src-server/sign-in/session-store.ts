import session from 'express-session'
import type { Queries } from '../database'
import { sessionRepository } from './session-repository'

declare module 'express-session' {
  interface SessionData {
    /** What passport keeps: the person's id alone. */
    passport?: { user: number }
    /** Where the sign-in came from; written once. */
    signedInFrom?: { address: string; agent: string }
    /** When the session was last seen, milliseconds since 1970; as read. */
    seenAtMs?: number
  }
}

export interface SessionLimits {
  idleMs: number
  absoluteMs: number
}

/** A session seen less long ago is not written again. */
const TOUCH_EVERY_MS = 60_000

interface StoreNeeds {
  queries: Queries
  limits: SessionLimits
  now: () => Date
  onTouchFailure: (error: unknown) => void
}
type Done = (error?: unknown) => void

/**
 * Sessions in the database, so that any node knows them and ending one ends it everywhere at once. Only the person's id
 * is kept; sessions without a person are not kept at all.
 */
export class DatabaseSessionStore extends session.Store {
  constructor(private readonly needs: StoreNeeds) {
    super()
  }

  override get(id: string, done: (error: unknown, data?: session.SessionData | null) => void): void {
    const { queries, limits, now } = this.needs
    sessionRepository.live(queries, id, now(), limits.idleMs).then(
      (row) =>
        done(
          null,
          row && {
            cookie: new session.Cookie(),
            passport: { user: row.personId },
            seenAtMs: row.seenAt.getTime(),
          },
        ),
      (error: unknown) => done(error),
    )
  }

  override set(id: string, data: session.SessionData, done: Done = () => {}): void {
    const { queries, limits, now } = this.needs
    const personId = data.passport?.user
    if (personId === undefined) return done()
    const at = now()
    sessionRepository
      .insert(queries, id, {
        personId,
        createdAt: at,
        seenAt: at,
        expiresAt: new Date(at.getTime() + limits.absoluteMs),
        address: data.signedInFrom?.address.slice(0, 45) ?? '',
        agent: data.signedInFrom?.agent.slice(0, 200) ?? '',
      })
      .then(() => done(), done)
  }

  override destroy(id: string, done: Done = () => {}): void {
    sessionRepository.remove(this.needs.queries, id).then(() => done(), done)
  }

  /** Never holds up an answer: the time last seen may be late. */
  override touch(id: string, data: session.SessionData, done: () => void = () => {}): void {
    const { queries, limits, now, onTouchFailure } = this.needs
    const at = now()
    const everyMs = Math.min(TOUCH_EVERY_MS, limits.idleMs / 4)
    if (data.seenAtMs !== undefined && at.getTime() - data.seenAtMs >= everyMs)
      sessionRepository.touch(queries, id, at).catch(onTouchFailure)
    done()
  }
}
