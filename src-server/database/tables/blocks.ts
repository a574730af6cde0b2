import {
  char,
  index,
  int,
  mediumtext,
  mysqlEnum,
  mysqlTable,
  text,
  tinyint,
  unique,
  varchar,
} from 'drizzle-orm/mysql-core'
import { sql } from 'drizzle-orm'
import { z } from 'zod'
import { BLOCK_STATES } from '#shared/contracts/blocks'
import { SelfCheck } from '#shared/contracts/compute'
import { BLOCK_FUNCTIONS, REVISION_STATUSES, ROLES } from '#shared/contracts/names'
import { instant, jsonOf } from '../column-types'
import { people } from './people'

const Words = z.array(z.string())

export const blocks = mysqlTable('blocks', {
  id: int().autoincrement().primaryKey(),
  /** Lower case; the collation compares without case. */
  code: varchar({ length: 40 }).notNull().unique(),
  state: mysqlEnum(BLOCK_STATES).notNull().default('active'),
  createdAt: instant().notNull(),
})

export const revisions = mysqlTable(
  'revisions',
  {
    id: int().autoincrement().primaryKey(),
    blockId: int()
      .notNull()
      .references(() => blocks.id),
    number: int().notNull(),
    format: tinyint().notNull(),
    title: varchar({ length: 120 }).notNull(),
    function: mysqlEnum(BLOCK_FUNCTIONS).notNull(),
    topology: varchar({ length: 60 }).notNull(),
    order: tinyint().notNull(),
    tags: jsonOf(Words).notNull(),
    aliases: jsonOf(Words).notNull(),
    owner: varchar({ length: 80 }).notNull(),
    summary: varchar({ length: 300 }).notNull(),
    /** The page without front matter, as written. */
    source: mediumtext().notNull(),
    /** SHA-256 of what was reviewed, in hexadecimal. */
    sourceHash: char({ length: 64 }).notNull(),
    authorId: int()
      .notNull()
      .references(() => people.id),
    /** Name at the time; no later rename alters it. */
    authorName: varchar({ length: 80 }).notNull(),
    changeNote: varchar({ length: 2000 }).notNull(),
    status: mysqlEnum(REVISION_STATUSES).notNull(),
    submittedAt: instant().notNull(),
    approvedById: int().references(() => people.id),
    approvedByName: varchar({ length: 80 }),
    approvedByRole: mysqlEnum(ROLES),
    approvedAt: instant(),
    selfCheck: jsonOf(SelfCheck).notNull(),
    engineVersion: varchar({ length: 40 }).notNull(),
    withdrawnReason: varchar({ length: 2000 }),
    /** |H| in dB at evenly spaced log frequencies, for the row's sketch. */
    sketchDb: jsonOf(z.array(z.number())).notNull(),
    searchTitle: varchar({ length: 200 }).notNull(),
    /** Code, aliases, tags, function, topology. */
    searchWords: text().notNull(),
    searchNotes: mediumtext().notNull(),
    searchParts: text().notNull(),
    /** The block while this is its approved revision, else null: its unique key lets one only be approved. */
    approvedOf: int().generatedAlwaysAs(sql`(if(status = 'approved', block_id, null))`, { mode: 'virtual' }),
  },
  (table) => [
    unique('revisions_number').on(table.blockId, table.number),
    unique('revisions_one_approved').on(table.approvedOf),
    index('revisions_by_status').on(table.status),
  ],
)

/** Links from the notes of a revision to blocks, by code: the block may come later. */
export const blockLinks = mysqlTable(
  'block_links',
  {
    id: int().autoincrement().primaryKey(),
    fromRevisionId: int()
      .notNull()
      .references(() => revisions.id),
    toCode: varchar({ length: 40 }).notNull(),
    /** Null: whichever is approved. */
    toRevision: int(),
  },
  (table) => [index('block_links_to').on(table.toCode)],
)

export type BlockRow = typeof blocks.$inferSelect
export type RevisionRow = typeof revisions.$inferSelect
export type NewRevision = typeof revisions.$inferInsert
