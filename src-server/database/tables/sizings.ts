import { index, int, mysqlTable, unique, varchar } from 'drizzle-orm/mysql-core'
import { z } from 'zod'
import { TitleBlock } from '#shared/contracts/blocks'
import { Figure, LimitOutcome, ResponseVector, SelfCheck, StageOutcome } from '#shared/contracts/compute'
import { Conditions } from '#shared/contracts/conditions'
import { NOTE_MAX, OpAmpCopies, REASON_MAX, SaveSizing, TestPoint } from '#shared/contracts/sizings'
import { instant, jsonOf } from '../column-types'
import { blocks, revisions } from './blocks'
import { people } from './people'

export const sizings = mysqlTable(
  'sizings',
  {
    /** The 1234 of S-1234, from the counters table: auto-increment skips on a cluster. */
    number: int().primaryKey(),
    blockId: int()
      .notNull()
      .references(() => blocks.id),
    revisionId: int()
      .notNull()
      .references(() => revisions.id),
    /** As it was. */
    titleBlock: jsonOf(TitleBlock).notNull(),
    asked: jsonOf(SaveSizing.omit({ note: true, reason: true })).notNull(),
    outcome: jsonOf(StageOutcome).notNull(),
    conditions: jsonOf(Conditions).notNull(),
    opAmps: jsonOf(OpAmpCopies).notNull(),
    limitsNotKept: jsonOf(z.array(LimitOutcome)).notNull(),
    note: varchar({ length: NOTE_MAX }).notNull(),
    reason: varchar({ length: REASON_MAX }).notNull(),
    response: jsonOf(ResponseVector).notNull(),
    phaseRad: jsonOf(z.array(Figure)).notNull(),
    testTable: jsonOf(z.array(TestPoint)).notNull(),
    selfCheck: jsonOf(SelfCheck).notNull(),
    engineVersion: varchar({ length: 40 }).notNull(),
    savedById: int()
      .notNull()
      .references(() => people.id),
    savedByName: varchar({ length: 80 }).notNull(),
    savedAt: instant().notNull(),
    /** The client's own key for this save (Idempotency-Key): a repeated save finds the first by it. */
    clientKey: varchar({ length: 80 }),
  },
  (table) => [
    unique('sizings_client_key').on(table.savedById, table.clientKey),
    index('sizings_of_block').on(table.blockId, table.number),
    index('sizings_of_revision').on(table.revisionId),
  ],
)
export type SizingRow = typeof sizings.$inferSelect
export type NewSizing = typeof sizings.$inferInsert
