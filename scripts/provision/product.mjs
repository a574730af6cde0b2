import { existsSync, readFileSync } from 'node:fs'
import { join, resolve } from 'node:path'
import { fileURLToPath } from 'node:url'
import { ensureClient } from './client-build.mjs'
import { prepareDataFolder, requireSpace } from './data-folder.mjs'
import { startDatabaseServer } from './database-server.mjs'
import { environmentWithoutOurs } from './environment.mjs'
import { takeLock } from './lock.mjs'
import { ensurePackages } from './packages.mjs'
import { servingPort } from './ports.mjs'
import { endRunning } from './processes.mjs'
import { endFormerServer, startProductServer, untilServing } from './product-server.mjs'
import { ensureSystemPackages, MARIADB } from './system-packages.mjs'

export const ROOT = resolve(fileURLToPath(new URL('../..', import.meta.url)))

/** A first start writes about 120 MB; later ones need room to work. */
const FIRST_START_MEGABYTES = 300
const LATER_START_MEGABYTES = 50

/** @typedef {{ role: string, email: string, password: string }} Account */
/** @typedef {<T>(name: string, work: () => T | Promise<T>) => Promise<T>} Step */

/**
 * Starts the whole product: packages, database, client, server. Each step is handed to `step`, which may print it.
 * @param {object} options
 * @param {string} options.dataDir
 * @param {number} options.port 0: any free one
 * @param {boolean} [options.isPortGiven] false: when it is taken the next free one is used
 * @param {string} [options.host]
 * @param {string | null} [options.databaseUrl] an outside server's address; none: an own MariaDB is started
 * @param {string} [options.demo] '1' makes demonstration accounts
 * @param {Record<string, string | undefined>} [options.settings] more of the server's variables, such as BASE_URL
 * @param {Step} [options.step]
 * @param {(sentence: string) => void} [options.onTrouble]
 * @param {(reason: string) => void} [options.onGivenUp] told when the server cannot be kept running
 * @param {AbortSignal} [options.signal] ends the start between two steps
 * @param {string} [options.root]
 */
export async function startProduct(options) {
  const { dataDir, host = '127.0.0.1', databaseUrl = null, demo = '1', settings = {}, root = ROOT } = options
  const { onTrouble = () => {}, signal } = options
  const step = async (name, work) => {
    signal?.throwIfAborted()
    return options.step ? options.step(name, work) : work()
  }
  let isGivenUp = false
  const onGivenUp = (reason) => {
    isGivenUp = true
    options.onGivenUp?.(reason)
  }
  signal?.addEventListener('abort', endRunning, { once: true })
  prepareDataFolder(dataDir)
  const lock = takeLock(dataDir)
  /** @type {Awaited<ReturnType<typeof startDatabaseServer>> | null} */
  let database = null
  /** @type {Awaited<ReturnType<typeof startProductServer>> | null} */
  let server = null
  const stop = async () => {
    await server?.stop()
    await database?.stop()
    lock.release()
  }
  try {
    await endFormerServer(dataDir)
    const port = await servingPort({ host, port: options.port, isPortGiven: options.isPortGiven ?? true }, onTrouble)
    // First what may need an administrator, so that nobody waits to be told.
    if (databaseUrl === null) await step("MariaDB from Debian's packages", () => ensureSystemPackages(MARIADB))
    await step('npm packages', () => ensurePackages(root))
    if (databaseUrl === null) {
      requireRoomFor(dataDir)
      await step('Database', async () => {
        database = await startDatabaseServer(dataDir, { onTrouble })
        return `${database.isNew ? 'made' : 'there'}, on 127.0.0.1:${database.port}`
      })
    }
    await step('Client', () => ensureClient(root))
    await step('Server', async () => {
      server = await startProductServer({
        root,
        dataDir,
        onTrouble,
        onGivenUp,
        environment: {
          ...environmentWithoutOurs(),
          NODE_ENV: 'production',
          ...settings,
          DATABASE_URL: databaseUrl ?? database?.ownerUrl,
          ...(database && { DATABASE_RUNTIME_URL: database.runtimeUrl }),
          HOST: host,
          PORT: String(port),
          DATA_DIR: dataDir,
          DEMO: demo,
        },
      })
      lock.tell(server.address)
      await untilServing(server.address, onTrouble, () => isGivenUp || signal?.aborted === true)
    })
    signal?.throwIfAborted()
  } catch (error) {
    await stop()
    // What a broken-off step says is only that it was broken off.
    throw signal?.aborted ? signal.reason : error
  }
  return {
    address: /** @type {string} */ (server.address),
    /** @type {Account[]} */
    accounts: demo === '0' ? [] : accountsIn(dataDir),
    databasePid: () => database?.pid ?? null,
    serverPid: () => server?.pid ?? null,
    stop,
    /** Ends everything by force, now. */
    kill() {
      server?.kill()
      database?.kill()
      lock.release()
    },
  }
}

function requireRoomFor(dataDir) {
  const isFirst = !existsSync(join(dataDir, 'database'))
  requireSpace(
    dataDir,
    isFirst ? FIRST_START_MEGABYTES : LATER_START_MEGABYTES,
    'make room there, or let DATA_DIR name a folder elsewhere',
  )
}

/** @returns {Account[]} */
function accountsIn(dataDir) {
  try {
    return JSON.parse(readFileSync(join(dataDir, 'accounts.json'), 'utf8'))
  } catch {
    return []
  }
}
