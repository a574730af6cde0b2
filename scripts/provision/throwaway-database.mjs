import { randomBytes } from 'node:crypto'
import { startDatabaseServer } from './database-server.mjs'
import { throwawayFolder } from './throwaway-folder.mjs'

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
  const folder = await throwawayFolder()
  try {
    const server = await startDatabaseServer(folder.path, { isThrowaway: true, onTrouble })
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
        folder.remove()
      },
    }
  } catch (error) {
    folder.remove()
    throw error
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
