/** Something the person who started the command can mend: told as a sentence, without a trace. */
export class Refusal extends Error {
  /** @param {string} sentence @param {number} [exitCode] */
  constructor(sentence, exitCode = 1) {
    super(sentence)
    this.name = 'Refusal'
    this.exitCode = exitCode
  }
}

let isLineOpen = false

/** Prints one line to standard output. */
export function say(line = '') {
  process.stdout.write(`${isLineOpen ? '\n' : ''}${line}\n`)
  isLineOpen = false
}

/**
 * Does one step, printing its name at the start and how long it took at the end.
 * @template T
 * @param {string} name
 * @param {() => T | Promise<T>} work what it answers; a string is printed as the outcome
 * @returns {Promise<T>}
 */
export async function step(name, work) {
  const startedAt = performance.now()
  process.stdout.write(`${isLineOpen ? '\n' : ''}  ${name} … `)
  isLineOpen = true
  const outcome = await work()
  const words = `${typeof outcome === 'string' ? `${outcome}, ` : ''}${inSeconds(performance.now() - startedAt)}`
  process.stdout.write(isLineOpen ? `${words}\n` : `  ${name}: ${words}\n`)
  isLineOpen = false
  return outcome
}

/** @param {number} durationMs */
export const inSeconds = (durationMs) => `${(durationMs / 1000).toFixed(durationMs < 9950 ? 1 : 0)} s`

/**
 * Runs a command's body: a refusal becomes its sentence and its exit code, anything else a trace and 1.
 * @param {() => Promise<void>} body
 */
export async function command(body) {
  for (const stream of [process.stdout, process.stderr]) stream.on('error', () => {})
  try {
    await body()
  } catch (error) {
    if (isLineOpen) process.stdout.write('\n')
    const isRefusal = error instanceof Refusal
    process.stderr.write(`${isRefusal ? error.message : error instanceof Error ? error.stack : String(error)}\n`)
    process.exit(isRefusal ? error.exitCode : 1)
  }
}
