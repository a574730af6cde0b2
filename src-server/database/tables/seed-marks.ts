import { char, mysqlTable, varchar } from 'drizzle-orm/mysql-core'
import { instant } from '../column-types'

/** Seed files that were loaded, each once, by the hash of their bytes. */
export const seedMarks = mysqlTable('seed_marks', {
  file: varchar({ length: 120 }).primaryKey(),
  fileHash: char({ length: 64 }).notNull(),
  loadedAt: instant().notNull(),
})
