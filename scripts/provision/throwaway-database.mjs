import { randomBytes } from 'node:crypto'
import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { startDatabaseServer } from './database-server.mjs'
import { isAlive, processesWithArgument, stopProcess } from './processes.mjs'

const FOLDER = /^poleshelf-throwaway-(\d+)-\w+$/

/**
 * A MariaDB server for one run, gone with all it holds when it is stopped; or, given an outside server's address,
 * databases there whose names begin with a prefix of this run, dropped in the end.
 * @param {{ outsideUrl?: string | undefined, onTrouble?: (sentence: string) => void }} [options]
 * @returns {Promise<{ url: string, prefix: string, pid: number | null, stop: () => Promise<void> }>}
 *   url: of an account that may make databases, naming the database `prefix`, which is there
 */
export async function startThrowawayDatabase({ outsideUrl, onTrouble = () => {} } = {}) {
  const prefix = `poleshelf_test_${randomBytes(5).toString('hex')}`
  if (outsideUrl) {
    const url = new URL(outsideUrl)
    url.pathname = `/${prefix}`
    await makeDatabase(url.href, prefix)
    return { url: url.href, prefix, pid: null, stop: () => dropDatabases(url.href, prefix) }
  }
  await sweep()
  const folder = mkdtempSync(join(tmpdir(), `poleshelf-throwaway-${process.pid}-`))
  const remove = () => rmSync(folder, { recursive: true, force: true })
  try {
    const server = await startDatabaseServer(folder, { isThrowaway: true, onTrouble })
    const url = new URL(server.rootUrl ?? '')
    url.pathname = `/${prefix}`
    await makeDatabase(url.href, prefix)
    return {
      url: url.href,
      prefix,
      get pid() {
        return server.pid
      },
      async stop() {
        await server.stop()
        remove()
      },
    }
  } catch (error) {
    remove()
    throw error
  }
}

/** Ends and removes what runs left behind that were killed. */
async function sweep() {
  for (const name of readdirSync(tmpdir())) {
    const owner = FOLDER.exec(name)?.[1]
    if (owner === undefined || isAlive(Number(owner))) continue
    const folder = join(tmpdir(), name)
    for (const pid of processesWithArgument(`--datadir=${join(folder, 'database', 'data')}`))
      await stopProcess(pid, 10_000)
    rmSync(folder, { recursive: true, force: true })
  }
}

/** @param {string} url @param {(connection: import('mysql2/promise').Connection) => Promise<void>} work */
async function withServer(url, work) {
  // Loaded late: packages may have been installed by this very run.
  const { createConnection } = await import('mysql2/promise')
  const { hostname, port, username, password } = new URL(url)
  const connection = await createConnection({
    host: hostname,
    port: Number(port || 3306),
    user: decodeURIComponent(username),
    password: decodeURIComponent(password),
  })
  try {
    await work(connection)
  } finally {
    connection.destroy()
  }
}

const makeDatabase = (url, name) =>
  withServer(url, async (connection) => {
    await connection.query(`CREATE DATABASE \`${name}\` CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`)
  })

const dropDatabases = (url, prefix) =>
  withServer(url, async (connection) => {
    const [rows] = await connection.query(
      'SELECT schema_name AS name FROM information_schema.schemata WHERE LEFT(schema_name, ?) = ?',
      [prefix.length, prefix],
    )
    for (const { name } of /** @type {{ name: string }[]} */ (rows)) await connection.query(`DROP DATABASE \`${name}\``)
  })
