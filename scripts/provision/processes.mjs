import { spawn } from 'node:child_process'
import { readdirSync, readFileSync } from 'node:fs'
import { setTimeout as pause } from 'node:timers/promises'
import { Refusal } from './report.mjs'

const LINE_MAX = 300

/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set()
let isEnding = false

/** Asks what `run` started to end, and lets it start nothing more. */
export function endRunning() {
  isEnding = true
  for (const child of running) child.kill('SIGTERM')
}

/**
 * Runs a program to its end by argument list, never through a shell.
 * @param {string} program @param {readonly string[]} args
 * @param {{ cwd?: string, env?: Record<string, string | undefined>, input?: string, show?: boolean }} [options]
 *   show: its output goes to ours; otherwise it is collected
 * @returns {Promise<{ code: number | null, output: string }>} code null: it could not be run or was killed
 */
export function run(program, args, { cwd, env, input, show = false } = {}) {
  if (isEnding) return Promise.resolve({ code: null, output: 'broken off' })
  return new Promise((done) => {
    const child = spawn(program, args, {
      cwd,
      env: /** @type {NodeJS.ProcessEnv} */ (env ?? process.env),
      stdio: [input === undefined ? 'ignore' : 'pipe', show ? 'inherit' : 'pipe', show ? 'inherit' : 'pipe'],
    })
    running.add(child)
    let output = ''
    for (const stream of [child.stdout, child.stderr])
      stream?.setEncoding('utf8').on('data', (text) => (output += text))
    child.on('error', (error) => done({ code: null, output: `${output}${error.message}` }))
    child.on('close', (code) => {
      running.delete(child)
      done({ code, output })
    })
    child.stdin?.on('error', () => {}).end(input)
  })
}

/**
 * Like run, but anything but success is a refusal that ends with what the program said last.
 * @param {string} what sentence for when it fails, without its full stop
 * @param {string} program @param {readonly string[]} args @param {Parameters<typeof run>[2]} [options]
 */
export async function runOrRefuse(what, program, args, options) {
  const { code, output } = await run(program, args, options)
  if (code === 0) return output
  throw new Refusal(`${what}.${output.trim() === '' ? '' : ` It said last:\n${lastLines(output)}`}`)
}

/** @param {string} text @param {number} [count] */
export const lastLines = (text, count = 12) =>
  text
    .trimEnd()
    .split('\n')
    .filter((line) => line.trim() !== '')
    .slice(-count)
    .map((line) => `    ${line.slice(0, LINE_MAX)}`)
    .join('\n')

/** @param {number} pid */
export function isAlive(pid) {
  const stat = statOf(pid)
  return stat !== null && stat.state !== 'Z'
}

/** Identity of a process beyond its number, which is used again: when it started, in clock ticks since boot. */
export const startTicks = (pid) => statOf(pid)?.startTicks ?? null

function statOf(pid) {
  try {
    const text = readFileSync(`/proc/${pid}/stat`, 'utf8')
    // The name in brackets may itself hold spaces and brackets.
    const fields = text.slice(text.lastIndexOf(')') + 2).split(' ')
    return { state: fields[0], startTicks: Number(fields[19]) }
  } catch {
    return null
  }
}

/** Numbers of the living processes of this machine that were started with exactly this argument. */
export function processesWithArgument(argument) {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .map(Number)
    .filter((pid) => pid !== process.pid && isAlive(pid) && argumentsOf(pid).includes(argument))
}

function argumentsOf(pid) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0')
  } catch {
    return []
  }
}

/**
 * Asks a process to end and waits; ends it by force when it takes too long.
 * @param {number} pid @param {number} withinMs
 * @throws {Refusal} when it belongs to somebody else
 */
export async function stopProcess(pid, withinMs) {
  const signal = (name) => {
    try {
      process.kill(pid, name)
    } catch (error) {
      if (error.code === 'EPERM')
        throw new Refusal(`Process ${pid} of a former start still runs under another account; stop it there first.`)
    }
  }
  signal('SIGTERM')
  for (let waitedMs = 0; isAlive(pid); waitedMs += 50) {
    if (waitedMs >= withinMs) signal('SIGKILL')
    if (waitedMs >= withinMs + 5000) throw new Refusal(`Process ${pid} of a former start does not end.`)
    await pause(50)
  }
}
