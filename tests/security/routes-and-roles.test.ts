import { beforeAll, describe, expect, it } from 'vitest'
import { routesOf } from '../../src-server/http'
import { testServer, type Client, type TestServer } from '../support/server'

/** What each caller gets, in the order: no sign-in, reader, editor, lead. */
type Expected = readonly [number, number, number, number]
const CALLERS = ['no sign-in', 'reader', 'editor', 'lead'] as const

interface Row {
  route: string
  expected: Expected
  /** The address called, when the route has parameters. */
  at?: string
  body?: unknown
  contentType?: string
}

const SIZING = { block: 'lp1-inv', revision: 1, values: { Ri: '10k', Rf: '20k', Cf: '3n3' } }
const UNKNOWN = { email: 'nobody@poleshelf.example', password: 'not the password' }

/** Written by hand: a route that is missing here fails the test. Sign-out stands last, as it ends the sessions. */
const TABLE: readonly Row[] = [
  { route: 'GET /health/live', expected: [200, 200, 200, 200] },
  { route: 'GET /health/ready', expected: [200, 200, 200, 200] },
  { route: 'POST /csp-reports', expected: [204, 204, 204, 204], body: {}, contentType: 'application/csp-report' },
  { route: 'POST /api/sign-in', expected: [401, 401, 401, 401], body: UNKNOWN },
  { route: 'GET /api/me', expected: [401, 200, 200, 200] },
  { route: 'GET /api/blocks', expected: [401, 200, 200, 200] },
  { route: 'GET /api/blocks/:code', at: '/api/blocks/lp1-inv', expected: [401, 200, 200, 200] },
  {
    route: 'GET /api/blocks/:code/revisions/:number',
    at: '/api/blocks/lp1-inv/revisions/1',
    expected: [401, 200, 200, 200],
  },
  {
    route: 'POST /api/blocks/:code/compute',
    at: '/api/blocks/lp1-inv/compute',
    body: {},
    expected: [401, 200, 200, 200],
  },
  {
    route: 'POST /api/blocks/:code/revisions/:number/compute',
    at: '/api/blocks/lp1-inv/revisions/1/compute',
    body: {},
    expected: [401, 200, 200, 200],
  },
  { route: 'POST /api/sizings', body: SIZING, expected: [401, 201, 201, 201] },
  { route: 'GET /api/sizings', expected: [401, 200, 200, 200] },
  { route: 'GET /api/sizings/:number', at: '/api/sizings/S-1', expected: [401, 200, 200, 200] },
  { route: 'POST /api/sizings/:number/check', at: '/api/sizings/S-1/check', expected: [401, 200, 200, 200] },
  { route: 'GET /api/documents/:name', at: '/api/documents/block-format', expected: [401, 200, 200, 200] },
  { route: 'POST /api/sign-out', expected: [204, 204, 204, 204] },
]

let server: TestServer
let clients: Record<(typeof CALLERS)[number], Client>

beforeAll(async () => {
  server = await testServer({ environment: { DEMO: '1' } })
  clients = {
    'no sign-in': server.stranger(),
    reader: await server.signedIn('reader'),
    editor: await server.signedIn('editor'),
    lead: await server.signedIn('lead'),
  }
}, 60_000)

describe('routes and roles', () => {
  it('knows every route that is served, and no other', () => {
    const served = routesOf(server.assembly.app).map(({ method, path }) => `${method} ${path}`)
    expect(served.sort()).toEqual(TABLE.map((row) => row.route).sort())
  })

  it.each(TABLE)('$route', async ({ route, at, body, contentType, expected }) => {
    const [method, path] = route.split(' ') as [string, string]
    const headers: Record<string, string> = contentType ? { 'content-type': contentType } : {}
    const statuses: number[] = []
    for (const caller of CALLERS)
      statuses.push((await clients[caller].request(method, at ?? path, body, headers)).status)
    expect(statuses).toEqual(expected)
  })
})
