import { createHash, randomUUID } from 'node:crypto'
import { setTimeout as pause } from 'node:timers/promises'
import { and, eq, isNull, lt } from 'drizzle-orm'
import { ProblemError } from '#shared/problems'
import type { Queries } from '../database'
import { idempotencyKeys } from '../database/tables/idempotency-keys'

const KEY_FORM = /^[A-Za-z0-9._:-]{8,80}$/
const WORK_MS = 6000
const WAIT_MS = 8000
const KEPT_MS = 7 * 24 * 3600 * 1000

export interface KeptAnswer {
  status: number
  body: unknown
}

/** The key that a client sent. @throws {ProblemError} 'request-not-valid' when it does not have the form of one */
export function idempotencyKeyOf(header: string | undefined): string | null {
  if (header === undefined) return null
  if (!KEY_FORM.test(header))
    throw new ProblemError('request-not-valid', 'Idempotency-Key takes 8 to 80 letters, digits, hyphens or dots.')
  return header
}

/** SHA-256 of what makes two requests the same. */
export const requestHash = (method: string, address: string, body: unknown): string =>
  createHash('sha256')
    .update(JSON.stringify([method, address, body ?? null]))
    .digest('hex')

/**
 * Answers once a key: the first request works, those that come meanwhile wait for its answer, later ones get it again.
 * After a crash between saving and answering the work is done again; the service then finds its record by the key.
 */
export function idempotency(queries: Queries, now: () => Date) {
  const byKey = (personId: number, clientKey: string) =>
    and(eq(idempotencyKeys.personId, personId), eq(idempotencyKeys.clientKey, clientKey))
  const until = () => new Date(now().getTime() + WORK_MS)

  /** Whether this request is the one that does the work. */
  const claim = async (personId: number, clientKey: string, hash: string, worker: string): Promise<boolean> => {
    const [made] = await queries
      .insert(idempotencyKeys)
      .ignore()
      .values({ personId, clientKey, requestHash: hash, worker, workUntil: until(), createdAt: now() })
    if (made.affectedRows === 1) return true
    const [taken] = await queries
      .update(idempotencyKeys)
      .set({ worker, workUntil: until() })
      .where(
        and(
          byKey(personId, clientKey),
          eq(idempotencyKeys.requestHash, hash),
          isNull(idempotencyKeys.status),
          lt(idempotencyKeys.workUntil, now()),
        ),
      )
    return taken.affectedRows === 1
  }

  return {
    /**
     * @throws {ProblemError} 'key-reused' when the key came with another request, 'overloaded' when the first is still
     * being worked on after 8 s
     */
    async once(
      personId: number,
      clientKey: string,
      hash: string,
      work: () => Promise<KeptAnswer>,
    ): Promise<KeptAnswer> {
      const worker = randomUUID()
      const mine = and(byKey(personId, clientKey), eq(idempotencyKeys.worker, worker), isNull(idempotencyKeys.status))
      for (const startedMs = Date.now(); Date.now() - startedMs < WAIT_MS; await pause(60)) {
        if (await claim(personId, clientKey, hash, worker)) {
          try {
            const { status, body } = await work()
            await queries
              .update(idempotencyKeys)
              .set({ status, answer: JSON.stringify(body ?? null) })
              .where(mine)
            return { status, body }
          } catch (error) {
            // Refused: the person may mend the request and send it under the same key.
            await queries
              .delete(idempotencyKeys)
              .where(mine)
              .catch(() => {})
            throw error
          }
        }
        const [row] = await queries.select().from(idempotencyKeys).where(byKey(personId, clientKey))
        if (row && row.requestHash !== hash)
          throw new ProblemError('key-reused', 'This Idempotency-Key was sent with another request; take a new one.')
        if (row && row.status !== null) return { status: row.status, body: JSON.parse(row.answer ?? 'null') as unknown }
      }
      throw new ProblemError('overloaded', 'The first request with this key is still being worked on.')
    },
    /** Forgets answers older than a week. */
    async sweep(): Promise<void> {
      await queries.delete(idempotencyKeys).where(lt(idempotencyKeys.createdAt, new Date(now().getTime() - KEPT_MS)))
    },
  }
}
export type Idempotency = ReturnType<typeof idempotency>
