import { createHash, randomUUID } from 'node:crypto'
import { readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import mysql from 'mysql2/promise'
import { connectionOptions } from './pool'

const LEASE_SEC = 20
const BREAKPOINT = '--> statement-breakpoint'

const OWN_TABLES = [
  `CREATE TABLE IF NOT EXISTS migration_lease (
     id TINYINT NOT NULL PRIMARY KEY, holder CHAR(36) NULL, until DATETIME(3) NULL,
     CONSTRAINT migration_lease_single CHECK (id = 1)
   ) ENGINE = InnoDB DEFAULT CHARSET = ascii`,
  `CREATE TABLE IF NOT EXISTS migrations (
     name VARCHAR(120) NOT NULL PRIMARY KEY, file_hash CHAR(64) NOT NULL, applied_at DATETIME(3) NOT NULL
   ) ENGINE = InnoDB DEFAULT CHARSET = utf8mb4 COLLATE = utf8mb4_bin`,
  'INSERT IGNORE INTO migration_lease (id) VALUES (1)',
]

export interface MigrationSettings {
  /** An account that may create tables. */
  url: string
  /** Folder of numbered .sql files. */
  folder: string
  log?: (sentence: string) => void
}

/**
 * Brings the tables to the newest form. May be started by any number of nodes at once and killed at any point: a lease
 * row, not GET_LOCK (F5), lets one work at a time, and each statement of a file can be run again.
 *
 * @throws {Error} when an applied file was changed afterwards, or a statement fails
 */
export async function migrate({ url, folder, log = () => {} }: MigrationSettings): Promise<void> {
  const connection = await connectMaking(url)
  const holder = randomUUID()
  try {
    for (const statement of OWN_TABLES) await connection.query(statement)
    await takeLease(connection, holder, log)
    try {
      await applyAll(connection, folder, () => renewLease(connection, holder), log)
    } finally {
      await connection.query('UPDATE migration_lease SET holder = NULL, until = NULL WHERE id = 1 AND holder = ?', [
        holder,
      ])
    }
  } finally {
    connection.destroy()
  }
}

/** Connects to the database of the address; makes it when it is missing and the account may. */
async function connectMaking(url: string): Promise<mysql.Connection> {
  const { database, ...server } = connectionOptions(url)
  if (!database) throw new Error('The address of the database names no database.')
  const connection = await mysql.createConnection(server)
  try {
    await connection.query("SET SESSION time_zone = '+00:00', sql_mode = 'STRICT_ALL_TABLES,NO_ENGINE_SUBSTITUTION'")
    await connection
      .query(
        `CREATE DATABASE IF NOT EXISTS ${mysql.escapeId(database)} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`,
      )
      .catch(() => {})
    await connection.query(`USE ${mysql.escapeId(database)}`)
    return connection
  } catch (error) {
    connection.destroy()
    throw error
  }
}

async function renewLease(connection: mysql.Connection, holder: string): Promise<boolean> {
  const [outcome] = await connection.query<mysql.ResultSetHeader>(
    `UPDATE migration_lease SET holder = ?, until = NOW(3) + INTERVAL ${LEASE_SEC} SECOND
      WHERE id = 1 AND (holder IS NULL OR holder = ? OR until < NOW(3))`,
    [holder, holder],
  )
  return outcome.affectedRows === 1
}

async function takeLease(connection: mysql.Connection, holder: string, log: (sentence: string) => void): Promise<void> {
  for (let waited = 0; !(await renewLease(connection, holder)); waited += 1) {
    if (waited === 0) log('Another node is bringing the tables up to date; waiting for it.')
    await pause(200)
  }
}

async function applyAll(
  connection: mysql.Connection,
  folder: string,
  renew: () => Promise<boolean>,
  log: (sentence: string) => void,
): Promise<void> {
  const [rows] = await connection.query<mysql.RowDataPacket[]>('SELECT name, file_hash FROM migrations')
  const applied = new Map(rows.map((row) => [row['name'] as string, row['file_hash'] as string]))
  const files = (await readdir(folder)).filter((name) => name.endsWith('.sql')).sort()
  for (const name of files) {
    const text = await readFile(join(folder, name), 'utf8')
    const hash = createHash('sha256').update(text).digest('hex')
    const before = applied.get(name)
    if (before === hash) continue
    if (before) throw new Error(`The migration ${name} was changed after it had been applied.`)
    for (const statement of text
      .split(BREAKPOINT)
      .map((one) => one.trim())
      .filter(Boolean)) {
      if (!(await renew())) throw new Error('The migration lease went to another node.')
      await connection.query(statement)
    }
    await connection.query('INSERT IGNORE INTO migrations (name, file_hash, applied_at) VALUES (?, ?, NOW(3))', [
      name,
      hash,
    ])
    log(`Applied ${name}.`)
  }
}
