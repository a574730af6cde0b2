import { spawn } from 'node:child_process'
import { setTimeout as pause } from 'node:timers/promises'

/**
 * Keeps a program running until it is stopped: an unexpected end starts it again, later each time. It has a process
 * group of its own, so that Ctrl-C reaches it only through us, in order.
 *
 * @param {object} options
 * @param {string} options.program @param {readonly string[]} options.args
 * @param {import('node:child_process').SpawnOptions} options.spawnOptions
 * @param {(child: import('node:child_process').ChildProcess) => Promise<void>} options.untilReady rejects when it is no use
 * @param {(sentence: string) => void} options.onTrouble told of each unexpected end and return
 * @param {string} options.name as sentences call it
 * @param {(code: number | null) => boolean} [options.isFinal] whether this end is not to be tried again
 * @param {(reason: string) => void} [options.onGivenUp]
 * @param {number} [options.endsAMinute] more unexpected ends than this within a minute: given up
 */
export function supervise(options) {
  const { name, onTrouble, isFinal = () => false, onGivenUp = () => {}, endsAMinute = Infinity } = options
  /** @type {import('node:child_process').ChildProcess | null} */
  let child = null
  let isStopping = false
  /** @type {number[]} */
  let ends = []

  const start = async () => {
    const started = spawn(options.program, options.args, { ...options.spawnOptions, detached: true })
    child = started
    const ended = new Promise((done) => {
      started.once('error', (error) => done(error.message))
      started.once('exit', (code, signal) => done(signal ?? code))
    })
    const untilReady = options.untilReady(started)
    const outcome = await Promise.race([untilReady.then(() => null), ended.then((how) => ({ how }))])
    if (outcome === null) return { ended }
    untilReady.catch(() => {})
    throw Object.assign(new Error(`${name} ended while starting (${outcome.how})`), { how: outcome.how })
  }

  const keep = async (first) => {
    let { ended } = first
    for (;;) {
      const how = await ended
      if (isStopping) return
      const now = Date.now()
      ends = [...ends.filter((at) => now - at < 60_000), now]
      if (isFinal(how)) return onGivenUp(`${name} ended (${how}).`)
      if (ends.length > endsAMinute) return onGivenUp(`${name} ended ${ends.length} times within a minute.`)
      onTrouble(`${name} ended unexpectedly (${how}); it is started again.`)
      for (let waitMs = 200 * 2 ** (ends.length - 1); ; waitMs *= 2) {
        await pause(Math.min(waitMs, 15_000))
        if (isStopping) return
        try {
          ended = (await start()).ended
          onTrouble(`${name} runs again.`)
          break
        } catch (error) {
          if (isStopping) return
          if (isFinal(error.how)) return onGivenUp(`${name} ended (${error.how}).`)
          ends.push(Date.now())
          if (ends.length > endsAMinute) return onGivenUp(`${name} did not start ${ends.length} times within a minute.`)
          onTrouble(`${error.message}; it is tried again.`)
        }
      }
    }
  }

  return {
    /** Starts it and waits until it is ready. @throws when it ends before that */
    async begin() {
      const first = await start()
      void keep(first)
    },
    get pid() {
      return child?.pid ?? null
    },
    /** Asks it to end; by force after the time given. */
    async stop(withinMs) {
      isStopping = true
      const last = child
      if (!last || last.exitCode !== null || last.signalCode !== null || last.pid === undefined) return
      const ended = new Promise((done) => last.once('exit', done))
      last.kill('SIGTERM')
      const force = setTimeout(() => last.kill('SIGKILL'), withinMs)
      await ended
      clearTimeout(force)
    },
    /** Ends it by force, now. */
    kill() {
      isStopping = true
      child?.kill('SIGKILL')
    },
  }
}
