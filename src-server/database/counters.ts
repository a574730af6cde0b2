import { eq } from 'drizzle-orm'
import { counters } from './tables/counters'
import type { Transaction } from './transaction'

/**
 * The next number of a series, 1 upwards: S of sizings. The row stays locked until the transaction ends, so that
 * numbers are dense and in order; auto-increment skips on a cluster.
 */
export async function nextNumber(tx: Transaction, name: 'S'): Promise<number> {
  const [row] = await tx.select().from(counters).where(eq(counters.name, name)).for('update')
  if (!row) throw new Error(`No counter ${name}.`)
  const next = row.value + 1
  await tx.update(counters).set({ value: next }).where(eq(counters.name, name))
  return next
}
