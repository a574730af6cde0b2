import { createServer } from 'node:net'
import { Refusal } from './report.mjs'

/**
 * The port if it is free on this address, else null; 0 gives any free one.
 * @param {number} port @param {string} [host]
 * @returns {Promise<number | null>}
 * @throws {NodeJS.ErrnoException} when the address itself cannot be listened on
 */
export function freePort(port, host = '127.0.0.1') {
  return new Promise((done, fail) => {
    const probe = createServer()
    probe.once('error', (/** @type {NodeJS.ErrnoException} */ error) =>
      error.code === 'EADDRINUSE' ? done(null) : fail(error),
    )
    probe.listen(port, host.replace(/^\[|\]$/g, ''), () => {
      const address = probe.address()
      probe.close(() => done(typeof address === 'object' && address ? address.port : null))
    })
  })
}

/**
 * The port to serve on: the one asked for; when it is taken and only a default, the next free one.
 * @param {{ host: string, port: number, isPortGiven: boolean }} asked port 0: any free one
 * @param {(sentence: string) => void} onOther told when it is another than the default
 * @throws {Refusal} when the one asked for is taken, or the address is not this machine's
 */
export async function servingPort({ host, port, isPortGiven }, onOther) {
  try {
    const free = await freePort(port, host)
    if (free !== null) return free
    if (isPortGiven)
      throw new Refusal(`Port ${port} on ${host} is taken by another program; another value of PORT chooses another.`)
    for (let other = port + 1; other <= port + 50; other += 1)
      if ((await freePort(other, host)) !== null) {
        onOther(`Port ${port} is taken; ${other} is used this time.`)
        return other
      }
    throw new Refusal(`Ports ${port} to ${port + 50} on ${host} are all taken; PORT chooses another.`)
  } catch (error) {
    if (error instanceof Refusal) throw error
    throw new Refusal(
      `Port ${port} on HOST ${host} cannot be listened on (${error.code}); HOST or PORT chooses another.`,
    )
  }
}
