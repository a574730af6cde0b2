import { spawn, execFileSync } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import { mkdtempSync, rmSync } from 'node:fs'
import { createServer, type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import mysql from 'mysql2/promise'
import { afterAll } from 'vitest'
import { migrate } from '../../src-server/database/migrate'

export const MIGRATIONS = resolve('drizzle')

/** A port that was free a moment ago. */
export function freePort(): Promise<number> {
  return new Promise((done, fail) => {
    const probe = createServer().once('error', fail)
    probe.listen(0, '127.0.0.1', () => {
      const { port } = probe.address() as AddressInfo
      probe.close(() => done(port))
    })
  })
}

export interface ThrowAwayServer {
  /** Root's address, without a database. */
  url: string
  signal(name: NodeJS.Signals): void
  /** Starts it again on the same port and data after a kill. */
  start(): Promise<void>
  stop(): Promise<void>
}

/** A MariaDB of its own in a temporary folder; gone when the test process is, however that ends. */
export async function throwAwayServer(options: string[] = []): Promise<ThrowAwayServer> {
  const folder = mkdtempSync(join(tmpdir(), 'poleshelf-test-'))
  const asRoot = process.getuid?.() === 0 ? ['--user=root'] : []
  const data = join(folder, 'data')
  execFileSync(
    'mariadb-install-db',
    ['--no-defaults', `--datadir=${data}`, '--skip-test-db', '--auth-root-authentication-method=normal', ...asRoot],
    { stdio: 'ignore' },
  )
  const port = await freePort()
  const url = `mysql://root@127.0.0.1:${port}/`
  let serverPid = 0
  const start = async () => {
    // The shell ends the server when our end of its standard input closes: also when this process is killed.
    const shell = spawn(
      'sh',
      [
        '-c',
        'exec 3<&0; "$@" >/dev/null 2>&1 3<&- & pid=$!; echo $pid; (cat <&3 >/dev/null; kill -9 $pid) & watcher=$!; wait $pid; kill $watcher',
        'sh',
        'mariadbd',
        '--no-defaults',
        ...asRoot,
        `--datadir=${data}`,
        `--socket=${join(folder, 'socket')}`,
        '--bind-address=127.0.0.1',
        `--port=${port}`,
        '--innodb-buffer-pool-size=64M',
        '--innodb-ft-min-token-size=1',
        ...options,
      ],
      { stdio: ['pipe', 'pipe', 'ignore'] },
    )
    serverPid = await new Promise<number>((done) => shell.stdout.once('data', (line) => done(Number(String(line)))))
    await answering(url)
  }
  const server: ThrowAwayServer = {
    url,
    start,
    signal: (name) => void process.kill(serverPid, name),
    async stop() {
      try {
        process.kill(serverPid, 'SIGKILL')
      } catch {
        // Ended already.
      }
      await pause(100)
      rmSync(folder, { recursive: true, force: true })
    },
  }
  await start()
  return server
}

async function answering(url: string): Promise<void> {
  for (let tries = 0; tries < 200; tries += 1) {
    const connection = await mysql.createConnection(url).catch(() => null)
    if (connection) return connection.destroy()
    await pause(100)
  }
  throw new Error('The throw-away MariaDB did not start.')
}

let shared: Promise<ThrowAwayServer> | null = null

/** Root's address of the server for tests: TEST_DATABASE_URL, else one started for this test file. */
async function rootUrl(): Promise<string> {
  const given = process.env['TEST_DATABASE_URL']
  if (given) return given
  return (await (shared ??= throwAwayServer())).url
}

export interface TestDatabase {
  name: string
  url: string
  /** Root's connection within the database, for looking and meddling. */
  root: mysql.Connection
}

/** An empty database of its own, dropped after the file's tests. Call it within beforeAll or a test. */
export async function emptyDatabase(): Promise<TestDatabase> {
  const address = new URL(await rootUrl())
  const name = `poleshelf_test_${randomBytes(6).toString('hex')}`
  address.pathname = '/'
  const root = await mysql.createConnection(address.href)
  await root.query(`CREATE DATABASE ${name} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`)
  await root.query(`USE ${name}`)
  address.pathname = `/${name}`
  opened.push({ root, name })
  return { name, url: address.href, root }
}

/** A database with the newest tables. */
export async function migratedDatabase(): Promise<TestDatabase> {
  const database = await emptyDatabase()
  await migrate({ url: database.url, folder: MIGRATIONS })
  return database
}

const opened: { root: mysql.Connection; name: string }[] = []

afterAll(async () => {
  for (const { root, name } of opened.splice(0)) {
    await root.query(`DROP DATABASE IF EXISTS ${name}`).catch(() => {})
    root.destroy()
  }
  await (await shared)?.stop()
  shared = null
})
