import { char, index, int, mysqlTable, varchar } from 'drizzle-orm/mysql-core'
import { instant } from '../column-types'
import { people } from './people'

export const sessions = mysqlTable(
  'sessions',
  {
    /** SHA-256 of the id in the cookie, in hexadecimal: a copy of the table opens no session. */
    idHash: char({ length: 64 }).primaryKey(),
    personId: int()
      .notNull()
      .references(() => people.id, { onDelete: 'cascade' }),
    createdAt: instant().notNull(),
    seenAt: instant().notNull(),
    /** The absolute limit. */
    expiresAt: instant().notNull(),
    address: varchar({ length: 45 }).notNull(),
    agent: varchar({ length: 200 }).notNull(),
  },
  (table) => [index('sessions_of_person').on(table.personId), index('sessions_by_end').on(table.expiresAt)],
)
export type SessionRow = typeof sessions.$inferSelect
