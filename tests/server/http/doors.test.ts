import { connect } from 'node:net'
import { beforeAll, describe, expect, it, vi } from 'vitest'
import zlib from 'node:zlib'
import { ProblemDocument } from '#shared/contracts/problem'
import { testServer, type Client, type TestServer } from '../../support/server'

let server: TestServer
let reader: Client

beforeAll(async () => {
  server = await testServer()
  reader = await server.signedIn('reader')
}, 60_000)

const SIGN_IN = { email: 'reader@poleshelf.example', password: 'wrong' }

/** Sends bytes as they are and gives what comes back. */
function raw(text: string): Promise<string> {
  return new Promise((done, fail) => {
    const { hostname, port } = new URL(server.base)
    let got = ''
    const socket = connect(Number(port), hostname, () => socket.write(text))
    socket.on('data', (data) => (got += String(data)))
    socket.on('close', () => done(got))
    socket.on('error', fail)
  })
}

describe('problem documents', () => {
  const long = `/api/${'x'.repeat(9000)}`
  it.each([
    ['bad JSON', 'POST', '/api/sign-in', '{"email":', {}, 400, 'request-not-valid'],
    ['text that is not an object', 'POST', '/api/sign-in', '"a"', {}, 400, 'request-not-valid'],
    ['a percent sign that starts nothing', 'GET', '/%zz', undefined, {}, 400, 'request-not-valid'],
    ['an unknown path of the interface', 'GET', '/api/nothing', undefined, {}, 404, 'not-found'],
    ['a known path with another method', 'PUT', '/api/me', {}, {}, 405, 'method-not-allowed'],
    [
      'a preflight',
      'OPTIONS',
      '/api/me',
      undefined,
      { origin: 'https://elsewhere.example' },
      405,
      'method-not-allowed',
    ],
    [
      'a body over the limit',
      'POST',
      '/api/sign-in',
      { email: 'x'.repeat(20_000), password: 'y' },
      {},
      413,
      'body-too-large',
    ],
    [
      'a form',
      'POST',
      '/api/sign-in',
      'email=a',
      { 'content-type': 'application/x-www-form-urlencoded' },
      415,
      'media-type-refused',
    ],
    [
      'plain text that holds JSON',
      'POST',
      '/api/sign-in',
      '{}',
      { 'content-type': 'text/plain' },
      415,
      'media-type-refused',
    ],
    ['an address over 8 kB', 'GET', long, undefined, {}, 414, 'address-too-long'],
    ['no session', 'GET', '/api/me', undefined, {}, 401, 'not-signed-in'],
  ])('answers %s with its own', async (_what, method, path, body, headers, status, code) => {
    const answer = await server.stranger().request(method, path, body, headers as Record<string, string>)
    expect(answer.status).toBe(status)
    expect(answer.headers.get('content-type')).toMatch(/^application\/problem\+json/)
    expect(ProblemDocument.parse(answer.body)).toMatchObject({ type: `/problems/${code}`, status })
    expect(answer.text).not.toMatch(/node_modules|at .*\.ts|SELECT|express/i)
  })

  it('names Allow with 405', async () => {
    expect((await reader.request('DELETE', '/api/me')).headers.get('allow')).toBe('GET, HEAD')
  })

  it('points at each field that does not fit', async () => {
    const { body } = await server.stranger().post('/api/sign-in', { email: 7, extra: 1, 'a/b': 2 })
    const pointers = body.errors.map((one: { pointer: string }) => one.pointer).sort()
    expect(pointers).toEqual(['#/a~1b', '#/email', '#/extra', '#/password'])
  })

  it('refuses query names that the route does not know', async () => {
    expect((await reader.get('/api/me?sort=password')).body.errors[0].pointer).toBe('#/query/sort')
  })

  it.each([
    ['two lengths', 'POST /api/me HTTP/1.1\r\nHost: a\r\nContent-Length: 1\r\nContent-Length: 2\r\n\r\nx', 400],
    [
      'length and chunks',
      'POST /api/me HTTP/1.1\r\nHost: a\r\nContent-Length: 1\r\nTransfer-Encoding: chunked\r\n\r\n0\r\n\r\n',
      400,
    ],
    ['20 kB of headers', `GET / HTTP/1.1\r\nHost: a\r\nX-Long: ${'x'.repeat(20_000)}\r\n\r\n`, 431],
  ])('answers %s with a problem document before the application sees it', async (_what, bytes, status) => {
    const answer = await raw(bytes)
    expect(answer).toMatch(new RegExp(`^HTTP/1.1 ${status} `))
    expect(answer).toContain('application/problem+json')
    expect(JSON.parse(answer.split('\r\n\r\n')[1]!)).toMatchObject({ status })
  })
})

describe('compressed bodies', () => {
  const paths = ['/api/sign-in', '/api/sign-out', '/csp-reports', '/api/nothing', '/', '/health/live']
  const encodings = ['br', 'gzip', 'deflate', 'zstd', 'x-gzip', 'identity, br', 'BR', 'br, br']

  it('are refused on every path, and no decoder is reached', async () => {
    const decoders = ['createBrotliDecompress', 'createGunzip', 'createInflate', 'createUnzip'] as const
    const probes = decoders.map((name) => vi.spyOn(zlib, name))
    for (const path of paths)
      for (const encoding of encodings) {
        const { status, body } = await server.stranger().post(path, SIGN_IN, { 'content-encoding': encoding })
        expect([path, encoding, status, body?.type]).toEqual([path, encoding, 415, '/problems/encoding-refused'])
      }
    for (const probe of probes) expect(probe).not.toHaveBeenCalled()
  })

  it('pass as identity', async () => {
    expect((await server.stranger().post('/api/sign-in', SIGN_IN, { 'content-encoding': 'identity' })).status).toBe(401)
  })
})

describe('requests from other sites', () => {
  it.each([
    ['cross-site', { 'sec-fetch-site': 'cross-site' }],
    ['another host of the same site', { 'sec-fetch-site': 'same-site' }],
    ['an address typed by hand, for a change', { 'sec-fetch-site': 'none' }],
    ['a foreign origin', { origin: 'https://elsewhere.example' }],
    ['an origin that is hidden', { origin: 'null' }],
  ])('are refused: %s', async (_what, headers) => {
    const answer = await reader.post('/api/sign-out', undefined, headers as Record<string, string>)
    expect([answer.status, answer.body.type]).toEqual([403, '/problems/cross-site'])
    expect(answer.headers.get('access-control-allow-origin')).toBeNull()
    expect((await reader.get('/api/me')).status).toBe(200)
  })

  it('are refused for reading too', async () => {
    expect((await reader.get('/api/me', { 'sec-fetch-site': 'cross-site' })).status).toBe(403)
    expect((await reader.get('/api/me', { 'sec-fetch-site': 'none' })).status).toBe(200)
  })

  it('let a script pass that sends JSON, and no form', async () => {
    const script = await server.signedIn('editor')
    expect((await script.post('/api/sign-out', undefined, { 'content-type': 'text/plain' })).status).toBe(415)
    expect((await script.post('/api/sign-out')).status).toBe(204)
  })

  it('let our own pages pass where browsers send Origin alone', async () => {
    const page = await server.signedIn('editor')
    expect((await page.post('/api/sign-out', undefined, { origin: server.base })).status).toBe(204)
  })
})

describe('headers', () => {
  it.each(['/api/me', '/api/nothing', '/health/live', '/%zz', '/.env', '/'])('are complete on %s', async (path) => {
    const { headers } = await server.stranger().get(path)
    const policy = headers.get('content-security-policy')!
    expect(policy).toContain("default-src 'none'")
    expect(policy).toContain("script-src 'self';")
    expect(policy).toContain("frame-ancestors 'none'")
    expect(policy).toContain('report-uri /csp-reports')
    expect(policy).not.toMatch(/upgrade-insecure|unsafe-eval/)
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('referrer-policy')).toBe('same-origin')
    expect(headers.get('cross-origin-opener-policy')).toBe('same-origin')
    expect(headers.get('cross-origin-resource-policy')).toBe('same-origin')
    expect(headers.get('strict-transport-security')).toBeNull()
    expect(headers.get('x-powered-by')).toBeNull()
    expect(headers.get('etag')).toBeNull()
  })

  it('keep private answers out of caches', async () => {
    expect((await reader.get('/api/me')).headers.get('cache-control')).toBe('no-store')
    expect((await reader.get('/api/me/x.css')).status).toBe(404)
  })
})

describe('files that are nobody’s business', () => {
  it.each([
    '/.git/config',
    '/.env',
    '/package.json',
    '/src/App.vue',
    '/..%2fpackage.json',
    '/assets/index.js.map',
    '/%2e%2e/x.json',
  ])('are not there: %s', async (path) => {
    const answer = await raw(`GET ${path} HTTP/1.1\r\nHost: a\r\nConnection: close\r\n\r\n`)
    expect(answer).toMatch(/^HTTP\/1.1 404 /)
    expect(answer).toContain('application/problem+json')
  })
})

describe('policy reports', () => {
  it('are taken from anyone, counted and limited in size', async () => {
    const before = server.assembly.reports.count()
    const report = { 'csp-report': { 'violated-directive': 'script-src' } }
    const headers = { 'content-type': 'application/csp-report' }
    expect((await server.stranger().post('/csp-reports', report, headers)).status).toBe(204)
    expect(server.assembly.reports.count()).toBe(before + 1)
    expect((await server.stranger().post('/csp-reports', { x: 'y'.repeat(20_000) }, headers)).status).toBe(413)
  })
})
