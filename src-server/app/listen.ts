import { randomUUID } from 'node:crypto'
import { createServer, STATUS_CODES, type Server } from 'node:http'
import type { AddressInfo, Socket } from 'node:net'
import { setTimeout as pause } from 'node:timers/promises'

/** How long a node that is stopping still answers "not ready" before it takes no more connections. */
const NOT_READY_MS = 400
const IN_FLIGHT_MS = 7500

/** A server with its limits against slow and malformed requests; requests are given it by `on('request')`. */
export function makeServer(): Server {
  const server = createServer({
    headersTimeout: 20_000,
    requestTimeout: 40_000,
    keepAliveTimeout: 20_000,
    connectionsCheckingInterval: 5_000,
    maxHeaderSize: 16 * 1024,
  })
  server.on('clientError', (error: NodeJS.ErrnoException, socket) => refuseMalformed(error, socket as Socket))
  return server
}

/** @returns the address that is listened on, as http://127.0.0.1:8080 */
export function listen(server: Server, host: string, port: number): Promise<string> {
  return new Promise((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, host, () => {
      server.off('error', reject)
      const { address, family, port: taken } = server.address() as AddressInfo
      const name =
        address === '0.0.0.0' || address === '::' ? '127.0.0.1' : family === 'IPv6' ? `[${address}]` : address
      resolve(`http://${name}:${taken}`)
    })
  })
}

/** Lets what is under way be answered, then closes; within 8 s whatever happens. */
export async function drain(server: Server): Promise<void> {
  await pause(NOT_READY_MS)
  // A kept-alive connection would otherwise be asked again.
  server.prependListener('request', (_req, res) => res.setHeader('Connection', 'close'))
  const closed = new Promise<void>((resolve) => server.close(() => resolve()))
  // Connections whose last answer goes out meanwhile become idle one by one.
  const closing = setInterval(() => server.closeIdleConnections(), 100)
  const wait = new AbortController()
  await Promise.race([closed, pause(IN_FLIGHT_MS, undefined, { signal: wait.signal }).catch(() => {})])
  wait.abort()
  clearInterval(closing)
  server.closeAllConnections()
}

const MALFORMED: Readonly<Record<string, [number, string, string]>> = {
  HPE_HEADER_OVERFLOW: [431, 'request-not-valid', 'The request headers are larger than 16 kB.'],
  ERR_HTTP_REQUEST_TIMEOUT: [408, 'request-not-valid', 'The request took too long to arrive.'],
}

/** Requests that Node's parser refuses never reach the application; they get a problem document all the same. */
function refuseMalformed(error: NodeJS.ErrnoException, socket: Socket): void {
  if (error.code === 'ECONNRESET' || !socket.writable) return void socket.destroy()
  const [status, code, detail] = MALFORMED[error.code ?? ''] ?? [400, 'request-not-valid', 'The request is malformed.']
  const body = JSON.stringify({
    type: `/problems/${code}`,
    title: 'The request does not have the expected form',
    status,
    instance: `/requests/${randomUUID()}`,
    detail,
  })
  socket.end(
    [
      `HTTP/1.1 ${status} ${STATUS_CODES[status]}`,
      'Content-Type: application/problem+json',
      `Content-Length: ${Buffer.byteLength(body)}`,
      "Content-Security-Policy: default-src 'none'; frame-ancestors 'none'",
      'X-Content-Type-Options: nosniff',
      'Referrer-Policy: same-origin',
      'Cross-Origin-Resource-Policy: same-origin',
      'Cross-Origin-Opener-Policy: same-origin',
      'Cache-Control: no-store',
      'Connection: close',
      '',
      body,
    ].join('\r\n'),
  )
}
