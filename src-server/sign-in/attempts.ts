import { createHash } from 'node:crypto'
import { RateLimiterMemory, RateLimiterMySQL, RateLimiterRes, type RateLimiterAbstract } from 'rate-limiter-flexible'
import { ProblemError } from '#shared/problems'
import type { Database } from '../database'

const TABLE = 'rate_limits'
const QUARTER_HOUR_SEC = 900

export const ATTEMPT_LIMITS = {
  /** Wrong passwords for one account from one address. */
  pair: { points: 10, duration: QUARTER_HOUR_SEC },
  /** Wrong passwords from one address, whatever the account. */
  address: { points: 60, duration: QUARTER_HOUR_SEC },
  /** Wrong passwords for one account from addresses that its owner is not signed in from. */
  account: { points: 100, duration: 3600 },
} as const

type LimitName = keyof typeof ATTEMPT_LIMITS

/**
 * Slows guessing, counted in the database by all nodes together (in memory while it is away). The rightful owner gets
 * in: the tight limit is for account and address together, and the wide one of the account does not touch addresses
 * that the owner is signed in from.
 */
export function signInAttempts(pool: Database['pool'], databaseName: string) {
  const limiterOf = (name: LimitName): RateLimiterAbstract => {
    const options = { ...ATTEMPT_LIMITS[name], keyPrefix: `sign-in-${name}` }
    return new RateLimiterMySQL({
      ...options,
      storeClient: poolForLimiter(pool),
      storeType: 'pool',
      dbName: databaseName,
      tableName: TABLE,
      tableCreated: true,
      clearExpiredByTimeout: true,
      insuranceLimiter: new RateLimiterMemory(options),
    })
  }
  const limiters = { pair: limiterOf('pair'), address: limiterOf('address'), account: limiterOf('account') }
  const keysOf = (email: string, address: string, isKnownAddress: boolean): [LimitName, string][] => {
    const account = createHash('sha256').update(email.toLowerCase()).digest('hex').slice(0, 32)
    const pairs: [LimitName, string][] = [
      ['pair', `${account}|${address}`],
      ['address', address],
    ]
    return isKnownAddress ? pairs : [...pairs, ['account', account]]
  }

  return {
    /** Counts a try before its password is looked at. @throws {TooManyAttempts} when it is one too many */
    async count(email: string, address: string, isKnownAddress: boolean): Promise<void> {
      for (const [name, key] of keysOf(email, address, isKnownAddress)) {
        try {
          await limiters[name].consume(key)
        } catch (refusal) {
          if (refusal instanceof RateLimiterRes) throw new TooManyAttempts(Math.ceil(refusal.msBeforeNext / 1000))
          throw refusal
        }
      }
    },
    /** Takes a rightful try off the counts again. */
    async forgive(email: string, address: string, isKnownAddress: boolean): Promise<void> {
      for (const [name, key] of keysOf(email, address, isKnownAddress))
        await (name === 'pair' ? limiters[name].delete(key) : limiters[name].reward(key))
    },
  }
}
export type SignInAttempts = ReturnType<typeof signInAttempts>

/** Says after how many seconds to try again. */
export class TooManyAttempts extends ProblemError {
  constructor(readonly retryAfterSec: number) {
    super(
      'too-many-attempts',
      `Too many wrong passwords; try again in ${Math.max(1, Math.ceil(retryAfterSec / 60))} minutes.`,
    )
  }
}

type Callback = (error: unknown, rows?: unknown) => void

/** Our pool, with its deadlines, in the shape that the limiter asks for. */
function poolForLimiter(pool: Database['pool']) {
  return {
    getConnection(done: (error: unknown, connection?: unknown) => void) {
      pool.acquire().then((lease) => {
        const query = (sql: string, second: unknown, third?: Callback) => {
          const callback = typeof second === 'function' ? (second as Callback) : third
          lease.query(sql, typeof second === 'function' ? undefined : second).then(
            ([rows]) => callback?.(null, rows),
            (error: unknown) => callback?.(error),
          )
        }
        done(null, { query, rollback: () => lease.destroy(), release: () => lease.release() })
      }, done)
    },
  }
}
