import { int, mysqlEnum, mysqlTable, varchar } from 'drizzle-orm/mysql-core'
import { ROLES } from '#shared/contracts/names'
import { instant } from '../column-types'

export const people = mysqlTable('people', {
  id: int().autoincrement().primaryKey(),
  /** In lower case. */
  email: varchar({ length: 254 }).notNull().unique(),
  name: varchar({ length: 80 }).notNull(),
  role: mysqlEnum(ROLES).notNull(),
  passwordHash: varchar({ length: 255 }).notNull(),
  disabledAt: instant(),
  createdAt: instant().notNull(),
})
export type PersonRow = typeof people.$inferSelect
