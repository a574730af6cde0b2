import { eq, sql } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { nextNumber, problemOfDatabase } from '../../../src-server/database'
import { openPool, type Pool } from '../../../src-server/database/pool'
import { queriesOver } from '../../../src-server/database/queries'
import { counters } from '../../../src-server/database/tables/counters'
import { people } from '../../../src-server/database/tables/people'
import { transactionsOver } from '../../../src-server/database/transaction'
import { migratedDatabase, type TestDatabase } from '../../support/database'

let database: TestDatabase
const pools: Pool[] = []
const pool = (settings: Partial<Parameters<typeof openPool>[0]> = {}) => {
  const one = openPool({ url: database.url, connections: 8, ...settings })
  pools.push(one)
  return one
}

beforeAll(async () => {
  database = await migratedDatabase()
}, 60_000)
afterAll(() => Promise.all(pools.map((one) => one.close())))

const person = (email: string) => ({
  email,
  name: 'Someone',
  role: 'reader' as const,
  passwordHash: 'x',
  createdAt: new Date(),
})

describe.each([
  { snapshotIsolation: true, connections: 8 },
  { snapshotIsolation: false, connections: 8 },
  { snapshotIsolation: true, connections: 1 },
])('transactions with $connections connections, snapshot isolation $snapshotIsolation', (settings) => {
  it('gives 40 numbers at once without a gap or a double', async () => {
    const transaction = transactionsOver(pool(settings))
    const [before] = await queriesOver(pool(settings)).select().from(counters).where(eq(counters.name, 'S'))
    const numbers = await Promise.all(Array.from({ length: 40 }, () => transaction((tx) => nextNumber(tx, 'S'))))
    expect(numbers.sort((a, b) => a - b)).toEqual(Array.from({ length: 40 }, (_, i) => before!.value + 1 + i))
  })

  it('keeps nothing of work that fails', async () => {
    const own = pool(settings)
    const email = `half-${settings.connections}-${settings.snapshotIsolation}@poleshelf.example`
    const work = transactionsOver(own)(async (tx) => {
      await tx.insert(people).values(person(email))
      throw new Error('no')
    })
    await expect(work).rejects.toThrow('no')
    expect(await queriesOver(own).select().from(people).where(eq(people.email, email))).toEqual([])
  })
})

describe('transactions', () => {
  it.each([1213, 1205, 1020, 1047])('run whole again on error %i, and at most five times', async (errno) => {
    let runs = 0
    const transaction = transactionsOver(pool())
    const failing = (failures: number) => async () => {
      runs += 1
      if (runs <= failures) throw Object.assign(new Error('from the server'), { errno, code: 'ER_ANY' })
      return runs
    }
    expect(await transaction(failing(2))).toBe(3)
    runs = 0
    const error = await transaction(failing(99)).catch((one: unknown) => one)
    expect(runs).toBe(6)
    expect(problemOfDatabase(error)?.code).toBe('overloaded')
  })

  it('run again when the connection is lost before COMMIT', async () => {
    const own = pool()
    let runs = 0
    const value = await transactionsOver(own)(async (tx) => {
      runs += 1
      const [rows] = (await tx.execute(sql`SELECT CONNECTION_ID() AS id`)) as unknown as [{ id: number }[]]
      if (runs === 1) await database.root.query(`KILL ${rows[0]!.id}`)
      await tx.execute(sql`SELECT 1`)
      return runs
    })
    expect(value).toBe(2)
  })

  it('refuse to be nested, and refuse a second connection inside', async () => {
    const own = pool()
    const transaction = transactionsOver(own)
    await expect(transaction(() => transaction(async () => 1))).rejects.toThrow('inside a transaction')
    await expect(transaction(() => queriesOver(own).select().from(counters))).rejects.toMatchObject({
      cause: { message: expect.stringContaining('second connection') },
    })
  })

  it('wait for a row that another session holds, then give an answer within 10 s', async () => {
    await database.root.query('START TRANSACTION')
    await database.root.query("SELECT * FROM counters WHERE name = 'S' FOR UPDATE")
    const startedMs = Date.now()
    const error = await transactionsOver(pool())((tx) => nextNumber(tx, 'S')).catch((one: unknown) => one)
    await database.root.query('ROLLBACK')
    expect(problemOfDatabase(error)?.code).toBe('overloaded')
    expect(Date.now() - startedMs).toBeLessThan(10_000)
  })
})

describe('the pool', () => {
  it('answers instead of hanging when every connection is in use', async () => {
    const own = pool({ connections: 1, acquireMs: 300 })
    const held = await own.acquire()
    const error = await own.query('SELECT 1').catch((one: unknown) => one)
    expect(problemOfDatabase(error)?.code).toBe('database-away')
    held.release()
    await expect(own.query('SELECT 1')).resolves.toBeDefined()
  })

  it('gives back what arrives too late', async () => {
    const own = pool({ connections: 1, acquireMs: 100 })
    const held = await own.acquire()
    await Promise.allSettled(Array.from({ length: 20 }, () => own.query('SELECT 1')))
    held.release()
    for (let i = 0; i < 20; i += 1) await own.query('SELECT 1')
  })

  it('throws away a connection whose statement missed its deadline', async () => {
    const own = pool({ connections: 1, statementMs: 300 })
    await expect(own.query('SELECT SLEEP(5)')).rejects.toMatchObject({ code: 'PROTOCOL_SEQUENCE_TIMEOUT' })
    await expect(own.query('SELECT 1')).resolves.toBeDefined()
  })

  it('survives connections that the server closed', async () => {
    const own = pool({ connections: 4 })
    const ids = await Promise.all(
      Array.from(
        { length: 4 },
        async () => ((await own.query('SELECT CONNECTION_ID() AS id, SLEEP(0.1)'))[0] as { id: number }[])[0]!.id,
      ),
    )
    for (const id of new Set(ids)) await database.root.query(`KILL ${id}`)
    const answers = await Promise.all(Array.from({ length: 50 }, () => own.query('SELECT 1 AS one')))
    expect(answers).toHaveLength(50)
  })

  it('sets UTC, strictness, character set and snapshot isolation on each connection', async () => {
    await database.root.query("SET GLOBAL time_zone = '+05:30'")
    try {
      const [rows] = await pool().query(
        'SELECT @@session.time_zone zone, @@session.sql_mode mode, @@session.character_set_client cs, @@session.innodb_snapshot_isolation si',
      )
      expect((rows as unknown[])[0]).toMatchObject({
        zone: '+00:00',
        mode: expect.stringContaining('STRICT_ALL_TABLES'),
        cs: 'utf8mb4',
        si: 1,
      })
    } finally {
      await database.root.query("SET GLOBAL time_zone = 'SYSTEM'")
    }
  })
})
