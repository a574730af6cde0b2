import { setTimeout as pause } from 'node:timers/promises'
import { ProblemError } from '#shared/problems'
import { isConnectionLost, isRetried } from './failure'
import { insideTransaction, type Pool } from './pool'
import { queriesOver, type Queries } from './queries'

const ATTEMPTS_MAX = 6
const RETRY_WITHIN_MS = 6000

/** What a repository gets inside `transaction(fn)`. */
export type Transaction = Queries
export type RunTransaction = <T>(work: (tx: Transaction) => Promise<T>) => Promise<T>

/**
 * Runs work in one transaction: all of it or nothing. On a deadlock, a lock wait, a passed snapshot, a node that is not
 * ready or a connection lost before COMMIT the whole function runs again, at most 5 times with jitter; so it must have
 * no effect outside the database. Never catch inside it and go on: error 1205 undoes the statement only (F3).
 *
 * @throws {ProblemError} 'database-away' when the answer to COMMIT was lost: kept or not is then found by the client's
 * own key, never by repeating blindly
 * @throws {Error} when called inside another transaction
 */
export function transactionsOver(
  pool: Pool,
  onRetry: (error: unknown, attempt: number) => void = () => {},
): RunTransaction {
  return async (work) => {
    if (insideTransaction.getStore()) throw new Error('A transaction is opened inside a transaction.')
    const startedMs = Date.now()
    for (let attempt = 1; ; attempt += 1) {
      try {
        return await once(pool, work)
      } catch (error) {
        const again = error instanceof ProblemError ? false : isRetried(error) || isConnectionLost(error)
        if (!again || attempt === ATTEMPTS_MAX || Date.now() - startedMs > RETRY_WITHIN_MS) throw error
        onRetry(error, attempt)
        await pause(10 * 2 ** attempt * (0.5 + Math.random()))
      }
    }
  }
}

async function once<T>(pool: Pool, work: (tx: Transaction) => Promise<T>): Promise<T> {
  const lease = await pool.acquire()
  try {
    await lease.query('START TRANSACTION')
    // Awaited within: a statement of the query builder starts when it is awaited.
    const value = await insideTransaction.run(true, async () => await work(queriesOver(lease)))
    await lease.query('COMMIT').catch((error: unknown) => {
      if (!isConnectionLost(error)) throw error
      throw new ProblemError(
        'database-away',
        'The database went away while saving. Whether it was kept is found out by sending the same request again.',
      )
    })
    return value
  } catch (error) {
    if (isConnectionLost(error)) lease.destroy()
    else await lease.query('ROLLBACK').catch(() => lease.destroy())
    throw error
  } finally {
    lease.release()
  }
}
