import { and, asc, desc, eq, inArray, or, sql } from 'drizzle-orm'
import type { RevisionStatus } from '#shared/contracts/names'
import type { Queries, Transaction } from '../database'
import { blockLinks, blocks, revisions, type NewRevision } from '../database/tables/blocks'
import { seedMarks } from '../database/tables/seed-marks'

/** All of a revision but its long texts. */
const line = {
  id: revisions.id,
  blockId: revisions.blockId,
  code: blocks.code,
  state: blocks.state,
  number: revisions.number,
  title: revisions.title,
  function: revisions.function,
  topology: revisions.topology,
  order: revisions.order,
  tags: revisions.tags,
  aliases: revisions.aliases,
  owner: revisions.owner,
  summary: revisions.summary,
  authorName: revisions.authorName,
  status: revisions.status,
  submittedAt: revisions.submittedAt,
  approvedByName: revisions.approvedByName,
  approvedAt: revisions.approvedAt,
  changeNote: revisions.changeNote,
  sketchDb: revisions.sketchDb,
  searchTitle: revisions.searchTitle,
  searchWords: revisions.searchWords,
  searchParts: revisions.searchParts,
} as const

const whole = {
  ...line,
  format: revisions.format,
  source: revisions.source,
  sourceHash: revisions.sourceHash,
  withdrawnReason: revisions.withdrawnReason,
} as const

export const blockRepository = {
  /** One revision a block in each of the statuses: the newest. */
  lines(queries: Queries, statuses: RevisionStatus[]) {
    return queries
      .select(line)
      .from(revisions)
      .innerJoin(blocks, eq(blocks.id, revisions.blockId))
      .where(inArray(revisions.status, statuses))
      .orderBy(asc(blocks.code), desc(revisions.number))
  },
  async notes(queries: Queries, ids: number[]) {
    if (ids.length === 0) return new Map<number, string>()
    const rows = await queries
      .select({ id: revisions.id, notes: revisions.searchNotes })
      .from(revisions)
      .where(inArray(revisions.id, ids))
    return new Map(rows.map((row) => [row.id, row.notes]))
  },
  /** The approved revision, else the newest that was. */
  async current(queries: Queries, code: string) {
    const [row] = await queries
      .select(whole)
      .from(revisions)
      .innerJoin(blocks, eq(blocks.id, revisions.blockId))
      .where(and(eq(blocks.code, code), inArray(revisions.status, ['approved', 'superseded', 'withdrawn'])))
      .orderBy(sql`${revisions.status} = 'approved' desc`, desc(revisions.number))
      .limit(1)
    return row ?? null
  },
  async revision(queries: Queries, code: string, number: number) {
    const [row] = await queries
      .select(whole)
      .from(revisions)
      .innerJoin(blocks, eq(blocks.id, revisions.blockId))
      .where(and(eq(blocks.code, code), eq(revisions.number, number)))
    return row ?? null
  },
  history(queries: Queries, blockId: number) {
    return queries
      .select({
        number: revisions.number,
        status: revisions.status,
        authorName: revisions.authorName,
        approvedByName: revisions.approvedByName,
        approvedAt: revisions.approvedAt,
        submittedAt: revisions.submittedAt,
        changeNote: revisions.changeNote,
      })
      .from(revisions)
      .where(eq(revisions.blockId, blockId))
      .orderBy(desc(revisions.number))
  },
  async links(queries: Queries, revisionId: number, code: string) {
    const to = await queries
      .select({ code: blockLinks.toCode })
      .from(blockLinks)
      .where(eq(blockLinks.fromRevisionId, revisionId))
    const from = await queries
      .select({ code: blocks.code })
      .from(blockLinks)
      .innerJoin(revisions, eq(revisions.id, blockLinks.fromRevisionId))
      .innerJoin(blocks, eq(blocks.id, revisions.blockId))
      .where(and(eq(blockLinks.toCode, code), eq(revisions.status, 'approved')))
    const sorted = (rows: { code: string }[]) => [...new Set(rows.map((row) => row.code))].sort()
    return { to: sorted(to), from: sorted(from) }
  },
  async insertBlock(tx: Transaction, code: string, createdAt: Date): Promise<number> {
    const [made] = await tx.insert(blocks).values({ code, createdAt })
    return made.insertId
  },
  async insertRevision(
    tx: Transaction,
    revision: NewRevision,
    links: { code: string; revision: number | null }[],
  ): Promise<void> {
    const [made] = await tx.insert(revisions).values(revision)
    if (links.length)
      await tx
        .insert(blockLinks)
        .values(links.map((one) => ({ fromRevisionId: made.insertId, toCode: one.code, toRevision: one.revision })))
  },
  async codesTaken(queries: Queries, codes: string[]): Promise<Set<string>> {
    if (codes.length === 0) return new Set()
    const rows = await queries
      .select({ code: blocks.code })
      .from(blocks)
      .where(or(...codes.map((code) => eq(blocks.code, code))))
    return new Set(rows.map((row) => row.code))
  },
  seedMarks: (queries: Queries) => queries.select().from(seedMarks),
  markSeed: (tx: Transaction, mark: typeof seedMarks.$inferInsert) => tx.insert(seedMarks).ignore().values(mark),
}
export type BlockRepository = typeof blockRepository
export type RevisionLineRow = Awaited<ReturnType<BlockRepository['lines']>>[number]
export type WholeRevision = NonNullable<Awaited<ReturnType<BlockRepository['revision']>>>
