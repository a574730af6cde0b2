import { createHash } from 'node:crypto'
import { and, eq, gt, lt, or } from 'drizzle-orm'
import type { Queries } from '../database'
import { sessions, type SessionRow } from '../database/tables/sessions'

/** How a session id stands in the table. */
export const hashOfId = (id: string): string => createHash('sha256').update(id).digest('hex')

/** The SQL about sessions. Ids are hashed on the way in. */
export const sessionRepository = {
  /** A session that neither rested nor lasted too long. */
  async live(queries: Queries, id: string, now: Date, idleMs: number): Promise<SessionRow | null> {
    const [row] = await queries
      .select()
      .from(sessions)
      .where(
        and(
          eq(sessions.idHash, hashOfId(id)),
          gt(sessions.expiresAt, now),
          gt(sessions.seenAt, new Date(now.getTime() - idleMs)),
        ),
      )
    return row ?? null
  },
  async insert(queries: Queries, id: string, row: Omit<SessionRow, 'idHash'>): Promise<void> {
    await queries
      .insert(sessions)
      .values({ ...row, idHash: hashOfId(id) })
      .onDuplicateKeyUpdate({ set: { personId: row.personId, seenAt: row.seenAt } })
  },
  async touch(queries: Queries, id: string, now: Date): Promise<void> {
    await queries
      .update(sessions)
      .set({ seenAt: now })
      .where(and(eq(sessions.idHash, hashOfId(id)), lt(sessions.seenAt, now)))
  },
  async remove(queries: Queries, id: string): Promise<void> {
    await queries.delete(sessions).where(eq(sessions.idHash, hashOfId(id)))
  },
  async removeEnded(queries: Queries, now: Date, idleMs: number): Promise<void> {
    await queries
      .delete(sessions)
      .where(or(lt(sessions.expiresAt, now), lt(sessions.seenAt, new Date(now.getTime() - idleMs))))
  },
  /** Whether the person has a session from this address. */
  async knowsAddress(queries: Queries, personId: number, address: string): Promise<boolean> {
    const [row] = await queries
      .select({ idHash: sessions.idHash })
      .from(sessions)
      .where(and(eq(sessions.personId, personId), eq(sessions.address, address)))
      .limit(1)
    return row !== undefined
  },
}
