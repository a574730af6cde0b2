import { int, mysqlTable, varchar } from 'drizzle-orm/mysql-core'

/** Last number given out in each series. */
export const counters = mysqlTable('counters', {
  name: varchar({ length: 8 }).primaryKey(),
  value: int().notNull(),
})
