import { existsSync, readFileSync, renameSync, statSync, writeFileSync } from 'node:fs'
import { connect } from 'node:net'
import { setTimeout as pause } from 'node:timers/promises'
import { asRoot, databaseUrls, ensureDatabaseFolder, LOG_SIZE } from './database-folder.mjs'
import { freePort } from './ports.mjs'
import { lastLines, processesWithArgument, stopProcess } from './processes.mjs'
import { Refusal, say } from './report.mjs'
import { supervise } from './supervised-child.mjs'
import { programPath } from './system-packages.mjs'

const READY_WITHIN_MS = 90_000
const LOG_MAX_BYTES = 5_000_000
const STOP_WITHIN_MS = 60_000
const SQL_MODE =
  'STRICT_ALL_TABLES,ONLY_FULL_GROUP_BY,NO_ZERO_IN_DATE,NO_ZERO_DATE,ERROR_FOR_DIVISION_BY_ZERO,NO_ENGINE_SUBSTITUTION'

/** @param {import('./database-folder.mjs').DatabaseFolder} folder @param {number} port */
const serverArguments = (folder, port) => [
  '--no-defaults',
  ...asRoot(),
  `--datadir=${folder.data}`,
  // Both relative to the data folder: the path of a Unix socket ends at 107 bytes.
  '--socket=mariadbd.sock',
  '--pid-file=mariadbd.pid',
  `--log-error=${folder.log}`,
  `--port=${port}`,
  '--bind-address=127.0.0.1',
  '--skip-name-resolve',
  '--character-set-server=utf8mb4',
  '--collation-server=utf8mb4_unicode_ci',
  `--sql-mode=${SQL_MODE}`,
  '--max-allowed-packet=64M',
  '--local-infile=OFF',
  '--symbolic-links=OFF',
  '--innodb-flush-log-at-trx-commit=1',
  '--innodb-doublewrite=ON',
  '--innodb-ft-min-token-size=1',
  // Servers before 10.6.18 and 10.11.8 do not know it; the pool asks for it on each connection as well.
  '--loose-innodb-snapshot-isolation=ON',
  LOG_SIZE,
]

/**
 * Starts a MariaDB server on loopback over a data folder's database and keeps it running.
 * @param {string} parent
 * @param {{ isThrowaway?: boolean, onTrouble?: (sentence: string) => void }} [options]
 */
export async function startDatabaseServer(parent, { isThrowaway = false, onTrouble = say } = {}) {
  const folder = await ensureDatabaseFolder(parent, { isThrowaway })
  for (const pid of processesWithArgument(`--datadir=${folder.data}`)) await stopProcess(pid, STOP_WITHIN_MS)
  setAsideLongLog(folder.log)
  for (let attempt = 1; ; attempt += 1) {
    const port = await choosePort(folder.portFile)
    const server = supervise({
      name: 'MariaDB',
      program: programPath('mariadbd') ?? 'mariadbd',
      args: serverArguments(folder, port),
      spawnOptions: { stdio: 'ignore', cwd: parent },
      untilReady: () => untilGreeting(port),
      onTrouble,
    })
    const logBefore = readLog(folder.log).length
    try {
      await server.begin()
    } catch {
      await server.stop(STOP_WITHIN_MS)
      const log = readLog(folder.log).slice(logBefore)
      if (attempt < 4 && /Address already in use/i.test(log)) continue
      throw new Refusal(`MariaDB did not start. Its log ${folder.log} ends:\n${lastLines(log, 8)}`)
    }
    return {
      ...databaseUrls(folder.credentials, port),
      port,
      isNew: folder.isNew,
      get pid() {
        return server.pid
      },
      kill: () => server.kill(),
      stop: () => server.stop(STOP_WITHIN_MS),
    }
  }
}

/** The port remembered from last time if it is still free, else a free one, remembered from now on. */
export async function choosePort(portFile) {
  let remembered = 0
  try {
    remembered = Number(readFileSync(portFile, 'utf8'))
  } catch {
    // The first start.
  }
  const isUsable = Number.isInteger(remembered) && remembered > 1023 && remembered < 65536
  const port = (isUsable ? await freePort(remembered) : null) ?? (await freePort(0))
  if (port === null) throw new Refusal('This machine has no free port on 127.0.0.1.')
  if (port !== remembered) writeFileSync(portFile, `${port}\n`, { mode: 0o600 })
  return port
}

async function untilGreeting(port) {
  const deadline = Date.now() + READY_WITHIN_MS
  while (!(await isGreeted(port))) {
    if (Date.now() > deadline) throw new Error(`MariaDB did not answer within ${READY_WITHIN_MS / 1000} s`)
    await pause(40)
  }
}

/** Whether a server greets in the MySQL protocol, version 10, at this port. */
export function isGreeted(port) {
  return new Promise((done) => {
    const socket = connect({ port, host: '127.0.0.1' })
    const answer = (value) => {
      socket.destroy()
      done(value)
    }
    socket.setTimeout(2000, () => answer(false))
    socket.once('error', () => answer(false))
    socket.once('close', () => done(false))
    socket.once('data', (bytes) => answer(bytes[4] === 10))
  })
}

/** Keeps one former log; mariadbd itself only ever adds to it. */
function setAsideLongLog(file) {
  if (existsSync(file) && statSync(file).size > LOG_MAX_BYTES) renameSync(file, `${file}.old`)
}

function readLog(file) {
  try {
    return readFileSync(file, 'utf8')
  } catch {
    return ''
  }
}
