import { and, desc, eq, lt } from 'drizzle-orm'
import type { Queries, Transaction } from '../database'
import { blocks, revisions } from '../database/tables/blocks'
import { sizings, type NewSizing } from '../database/tables/sizings'

export const sizingRepository = {
  async byNumber(queries: Queries, number: number) {
    const [row] = await queries
      .select({
        sizing: sizings,
        statusNow: revisions.status,
        withdrawnReason: revisions.withdrawnReason,
        code: blocks.code,
        revision: revisions.number,
      })
      .from(sizings)
      .innerJoin(revisions, eq(revisions.id, sizings.revisionId))
      .innerJoin(blocks, eq(blocks.id, sizings.blockId))
      .where(eq(sizings.number, number))
    return row ?? null
  },
  async byClientKey(queries: Queries, savedById: number, clientKey: string) {
    const [row] = await queries
      .select({ number: sizings.number })
      .from(sizings)
      .where(and(eq(sizings.savedById, savedById), eq(sizings.clientKey, clientKey)))
    return row?.number ?? null
  },
  /** Newest first, from below a number on. */
  list(
    queries: Queries,
    { before, limit, block, savedById }: { before?: number; limit: number; block?: string; savedById?: number },
  ) {
    return queries
      .select({
        number: sizings.number,
        code: blocks.code,
        title: revisions.title,
        revision: revisions.number,
        statusNow: revisions.status,
        outcome: sizings.outcome,
        note: sizings.note,
        savedByName: sizings.savedByName,
        savedAt: sizings.savedAt,
      })
      .from(sizings)
      .innerJoin(revisions, eq(revisions.id, sizings.revisionId))
      .innerJoin(blocks, eq(blocks.id, sizings.blockId))
      .where(
        and(
          before === undefined ? undefined : lt(sizings.number, before),
          block === undefined ? undefined : eq(blocks.code, block),
          savedById === undefined ? undefined : eq(sizings.savedById, savedById),
        ),
      )
      .orderBy(desc(sizings.number))
      .limit(limit)
  },
  async insert(tx: Transaction, sizing: NewSizing): Promise<void> {
    await tx.insert(sizings).values(sizing)
  },
}
export type SizingRepository = typeof sizingRepository
