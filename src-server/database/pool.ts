import { AsyncLocalStorage } from 'node:async_hooks'
import mysql from 'mysql2'
import { AcquireDeadlineError, isConnectionLost } from './failure'

export interface PoolSettings {
  url: string
  connections: number
  /** F2: newer servers refuse a read-then-write on a stale snapshot; off only in tests. */
  snapshotIsolation?: boolean
  acquireMs?: number
  statementMs?: number
  /** Told of each failure to connect and each statement that missed its deadline. */
  onTrouble?: (error: unknown) => void
}

/** Text of a statement or mysql2's options for it. */
export type Statement = string | (mysql.QueryOptions & { rowsAsArray?: boolean })
export type StatementResult = [unknown, mysql.FieldPacket[]]

/** One connection out of the pool, to be given back. */
export interface Lease {
  query(statement: Statement, values?: unknown): Promise<StatementResult>
  /** Gives the connection back; one that failed is thrown away. */
  release(): void
  destroy(): void
}

const SQL_MODE =
  'STRICT_ALL_TABLES,ONLY_FULL_GROUP_BY,NO_ZERO_IN_DATE,NO_ZERO_DATE,ERROR_FOR_DIVISION_BY_ZERO,NO_ENGINE_SUBSTITUTION'
export const QUEUE_LIMIT = 400
const UNKNOWN_VARIABLE = 1193
/** How much later than mysql2 itself we give a statement up. */
const UNHEARD_MS = 500

/** What is set on each connection, whatever the server's defaults are. */
const sessionSettings = (snapshotIsolation: boolean): string[] => [
  'SET NAMES utf8mb4 COLLATE utf8mb4_unicode_ci',
  `SET SESSION time_zone = '+00:00', sql_mode = '${SQL_MODE}', innodb_lock_wait_timeout = 2, autocommit = 1`,
  'SET SESSION TRANSACTION ISOLATION LEVEL REPEATABLE READ',
  `SET SESSION innodb_snapshot_isolation = ${snapshotIsolation ? 'ON' : 'OFF'}`,
]

/** mysql2's options from a mysql:// or mariadb:// address; `?socketPath=` in it names a socket. */
export function connectionOptions(url: string): mysql.ConnectionOptions {
  const address = new URL(url)
  const socketPath = address.searchParams.get('socketPath') ?? address.searchParams.get('socket')
  return {
    ...(socketPath ? { socketPath } : { host: address.hostname, port: Number(address.port || 3306) }),
    user: decodeURIComponent(address.username),
    password: decodeURIComponent(address.password),
    database: decodeURIComponent(address.pathname.slice(1)) || undefined,
    charset: 'utf8mb4_unicode_ci',
    timezone: 'Z',
    connectTimeout: 2500,
    supportBigNumbers: true,
    multipleStatements: false,
  }
}

const unanswered = (ms: number): NodeJS.ErrnoException =>
  Object.assign(new Error(`no answer to a statement within ${ms} ms`), { code: 'PROTOCOL_SEQUENCE_TIMEOUT' })

/** Inside a transaction nothing asks the pool again: with one connection that would wait for itself. */
export const insideTransaction = new AsyncLocalStorage<true>()

/**
 * The pool with what mysql2 lacks (F7): a deadline for getting a connection, a finite queue, a deadline a statement,
 * and the throwing away of connections that missed it.
 */
export function openPool({
  url,
  connections,
  snapshotIsolation = true,
  acquireMs = 3000,
  statementMs = 6000,
  onTrouble = () => {},
}: PoolSettings) {
  const pool = mysql.createPool({
    ...connectionOptions(url),
    connectionLimit: connections,
    maxIdle: connections,
    idleTimeout: 60_000,
    queueLimit: QUEUE_LIMIT,
    enableKeepAlive: true,
  })
  pool.on('connection', (connection) => {
    for (const statement of sessionSettings(snapshotIsolation))
      connection.query({ sql: statement, timeout: statementMs }, (error: mysql.QueryError | null) => {
        if (error && error.errno !== UNKNOWN_VARIABLE) connection.destroy()
      })
  })

  const lease = (connection: mysql.PoolConnection): Lease => {
    let lost = false
    let given = false
    const giveBack = (way: 'release' | 'destroy') => {
      if (given) return
      given = true
      connection[way]()
    }
    return {
      query: (statement, values) =>
        new Promise((resolve, reject) => {
          const options = typeof statement === 'string' ? { sql: statement } : statement
          const withinMs = options.timeout ?? statementMs
          let settled = false
          const fail = (error: NodeJS.ErrnoException) => {
            settled = true
            clearTimeout(deadline)
            lost ||= isConnectionLost(error)
            if (error.code === 'PROTOCOL_SEQUENCE_TIMEOUT') onTrouble(error)
            reject(error)
          }
          // mysql2 drops what waits on a connection that is destroyed, without a word.
          const deadline = setTimeout(() => fail(unanswered(withinMs)), withinMs + UNHEARD_MS)
          connection.query({ ...options, timeout: withinMs, values } as mysql.QueryOptions, (error, rows, fields) => {
            // mysql2 calls again, with a deadline missed, for a statement whose connection was lost long ago.
            if (settled) return
            if (error) return fail(error)
            settled = true
            clearTimeout(deadline)
            resolve([rows, fields])
          })
        }),
      release: () => giveBack(lost ? 'destroy' : 'release'),
      destroy: () => giveBack('destroy'),
    }
  }

  /** A connection within the deadline. @throws {AcquireDeadlineError} when none is free in time */
  const acquire = (): Promise<Lease> => {
    if (insideTransaction.getStore()) throw new Error('A transaction asks the pool for a second connection.')
    return new Promise((resolve, reject) => {
      let late = false
      const deadline = setTimeout(() => {
        late = true
        reject(new AcquireDeadlineError(`no connection within ${acquireMs} ms`))
      }, acquireMs)
      pool.getConnection((error, connection) => {
        clearTimeout(deadline)
        if (late) return connection?.release()
        if (error) {
          if (isConnectionLost(error)) onTrouble(error)
          return reject(error)
        }
        resolve(lease(connection))
      })
    })
  }

  /** One statement by itself. A read whose connection had died meanwhile is asked once more on another (C4). */
  const query = async (statement: Statement, values?: unknown): Promise<StatementResult> => {
    const sql = typeof statement === 'string' ? statement : statement.sql
    for (let attempt = 0; ; attempt += 1) {
      const one = await acquire()
      try {
        return await one.query(statement, values)
      } catch (error) {
        const timedOut = (error as { code?: string }).code === 'PROTOCOL_SEQUENCE_TIMEOUT'
        if (attempt > 0 || timedOut || !isConnectionLost(error) || !/^\s*select\b/i.test(sql)) throw error
      } finally {
        one.release()
      }
    }
  }

  return { acquire, query, close: () => new Promise<void>((resolve) => pool.end(() => resolve())) }
}

export type Pool = ReturnType<typeof openPool>
