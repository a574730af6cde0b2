import { char, index, int, longtext, mysqlTable, primaryKey, smallint, varchar } from 'drizzle-orm/mysql-core'
import { instant } from '../column-types'
import { people } from './people'

/** Requests that a client marked with a key of its own, and the answer that the first of them got. */
export const idempotencyKeys = mysqlTable(
  'idempotency_keys',
  {
    personId: int()
      .notNull()
      .references(() => people.id, { onDelete: 'cascade' }),
    clientKey: varchar({ length: 80 }).notNull(),
    /** SHA-256 of method, address and body. */
    requestHash: char({ length: 64 }).notNull(),
    /** Who works on it, until when; the answer ends it. */
    worker: char({ length: 36 }).notNull(),
    workUntil: instant().notNull(),
    status: smallint(),
    answer: longtext(),
    createdAt: instant().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.personId, table.clientKey] }),
    index('idempotency_keys_by_age').on(table.createdAt),
  ],
)
