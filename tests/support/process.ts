import { spawn } from 'node:child_process'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import { afterAll } from 'vitest'
import type { Account } from '../../src-server/people'

export interface ServerProcess {
  base: string
  dataDir: string
  pid: number
  signal(name: NodeJS.Signals): void
  /** Exit code and how long it took from now. */
  exit(): Promise<{ code: number | null; tookMs: number }>
  /** The demonstration accounts, once they are made. */
  accounts(): Account[]
  log(): Record<string, unknown>[]
}

const cleanUps: (() => void)[] = []
afterAll(() => cleanUps.splice(0).forEach((one) => one()))

/** The server as it is run for people, in a process of its own. */
export async function serverProcess(environment: Record<string, string>): Promise<ServerProcess> {
  const dataDir = environment['DATA_DIR'] ?? mkdtempSync(join(tmpdir(), 'poleshelf-process-'))
  const child = spawn(process.execPath, ['--import', 'tsx', 'src-server/main.ts'], {
    env: { PATH: process.env['PATH'], HOME: dataDir, PORT: '0', DATA_DIR: dataDir, DEMO: '1', ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  cleanUps.push(() => {
    child.kill('SIGKILL')
    if (!environment['DATA_DIR']) rmSync(dataDir, { recursive: true, force: true })
  })
  const ended = new Promise<number | null>((done) => child.once('exit', (code) => done(code)))
  let said = ''
  child.stderr.on('data', (data) => (said += String(data)))
  const base = await new Promise<string>((done, fail) => {
    let out = ''
    child.stdout.on('data', (data) => {
      out += String(data)
      const ready = /POLESHELF_READY (\{.*\})\n/.exec(out)
      if (ready) done((JSON.parse(ready[1]!) as { address: string }).address)
    })
    void ended.then((code) => fail(new Error(`It ended with ${code}: ${said}`)))
  })
  return {
    base,
    dataDir,
    pid: child.pid!,
    signal: (name) => void child.kill(name),
    async exit() {
      const beforeMs = Date.now()
      return { code: await ended, tookMs: Date.now() - beforeMs }
    },
    accounts: () => JSON.parse(readFileSync(join(dataDir, 'accounts.json'), 'utf8')) as Account[],
    log: () =>
      readFileSync(join(dataDir, 'log', 'poleshelf.log'), 'utf8')
        .trim()
        .split('\n')
        .map((line) => JSON.parse(line) as Record<string, unknown>),
  }
}

/** Status of an address; 0 when nothing answers. */
export const statusOf = (url: string): Promise<number> =>
  fetch(url, { signal: AbortSignal.timeout(5000) }).then(
    (answer) => answer.status,
    () => 0,
  )

/** Waits until it is so. @returns milliseconds waited @throws after the limit */
export async function until(isSo: () => Promise<boolean>, limitMs: number): Promise<number> {
  const beforeMs = Date.now()
  while (Date.now() - beforeMs < limitMs) {
    if (await isSo()) return Date.now() - beforeMs
    await pause(50)
  }
  throw new Error(`Not so within ${limitMs} ms.`)
}
