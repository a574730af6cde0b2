import { setTimeout as pause } from 'node:timers/promises'
import { processesWithArgument, stopProcess } from './processes.mjs'
import { Refusal, say } from './report.mjs'
import { supervise } from './supervised-child.mjs'

const LISTENS_WITHIN_MS = 60_000
const STOP_WITHIN_MS = 10_000
const TOLD_AFTER_MS = 15_000
const ENDS_A_MINUTE = 5
/** Exit codes of the server for what trying again does not mend: its configuration, its address. */
const FINAL_CODES = [2, 3]
const READY_LINE = /^POLESHELF_READY (\{.*\})$/m

/** The server does not read this argument; it tells whose process it is when its starter was killed. */
const markOf = (dataDir) => `--data-dir=${dataDir}`

/** Ends the server that a killed start of this data folder left running. */
export async function endFormerServer(dataDir) {
  for (const pid of processesWithArgument(markOf(dataDir))) await stopProcess(pid, STOP_WITHIN_MS)
}

/**
 * Starts Poleshelf's own server and keeps it running.
 * @param {object} options
 * @param {string} options.root @param {string} options.dataDir
 * @param {Record<string, string | undefined>} options.environment the server's whole environment
 * @param {(sentence: string) => void} [options.onTrouble]
 * @param {(reason: string) => void} [options.onGivenUp]
 */
export async function startProductServer({ root, dataDir, environment, onTrouble = say, onGivenUp = say }) {
  let address = ''
  let said = ''
  const server = supervise({
    name: 'The server',
    program: process.execPath,
    args: ['--import', 'tsx', 'src-server/main.ts', markOf(dataDir)],
    spawnOptions: {
      cwd: root,
      env: /** @type {NodeJS.ProcessEnv} */ (environment),
      stdio: ['ignore', 'pipe', 'pipe'],
    },
    untilReady: async (child) => {
      address = await untilListening(child, (text) => (said = `${said}${text}`.slice(-4000)))
    },
    onTrouble,
    onGivenUp: (reason) => onGivenUp(said.trim() === '' ? reason : `${reason} It said last:\n${said.trim()}`),
    isFinal: (code) => code !== null && FINAL_CODES.includes(code),
    endsAMinute: ENDS_A_MINUTE,
  })
  try {
    await server.begin()
  } catch (error) {
    await server.stop(STOP_WITHIN_MS)
    throw new Refusal(said.trim() || `${error.message}; the log in ${dataDir} may say why.`)
  }
  return {
    address,
    get pid() {
      return server.pid
    },
    kill: () => server.kill(),
    stop: () => server.stop(STOP_WITHIN_MS),
  }
}

/** The address in the line that the server prints once it listens; all that it prints is handed on as text. */
function untilListening(child, onText) {
  return new Promise((done, fail) => {
    let output = ''
    const deadline = setTimeout(() => fail(new Error('The server did not listen in time')), LISTENS_WITHIN_MS)
    child.once('exit', () => clearTimeout(deadline))
    child.stdout.setEncoding('utf8').on('data', (text) => {
      const before = output
      output = `${output}${text}`.slice(-4000)
      const line = READY_LINE.exec(output)
      if (line && !READY_LINE.test(before)) {
        clearTimeout(deadline)
        done(JSON.parse(line[1]).address)
      }
    })
    child.stderr.setEncoding('utf8').on('data', onText)
  })
}

/**
 * Waits until the server says that it can serve, telling what it waits for.
 * @param {string} address @param {(sentence: string) => void} onWaiting @param {() => boolean} isGivenUp
 */
export async function untilServing(address, onWaiting, isGivenUp = () => false) {
  let told = ''
  for (let startedAt = Date.now(); !isGivenUp(); await pause(100)) {
    const { status, sentence } = await readiness(address)
    if (status === 200) return
    if (Date.now() - startedAt > TOLD_AFTER_MS && sentence !== told) {
      onWaiting(sentence)
      told = sentence
    }
  }
}

async function readiness(address) {
  try {
    const response = await fetch(`${address}/health/ready`, { signal: AbortSignal.timeout(3000) })
    const body = await response.json().catch(() => ({}))
    return { status: response.status, sentence: String(body.detail ?? `It answers with status ${response.status}.`) }
  } catch {
    return { status: 0, sentence: 'The server does not answer yet.' }
  }
}
