import { pino } from 'pino'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import type { Role } from '#shared/contracts/names'
import { ProblemError } from '#shared/problems'
import { drain, listen, makeServer } from '../../../src-server/app/listen'
import { buildApp, idempotency, reply, route, type Route } from '../../../src-server/http'
import { clientOf, testServer, type Client } from '../../support/server'

const Thing = z.strictObject({ number: z.number() })
let made = 0
let databaseIsReady = true

const ROUTES: Route[] = [
  route(
    'POST /api/things',
    { role: 'editor', idempotent: true, body: z.strictObject({ name: z.string() }), answer: { 201: Thing } },
    () => ({ number: (made += 1) }),
  ),
  route(
    'GET /api/things/:number',
    {
      role: 'reader',
      params: z.object({ number: z.coerce.number().int() }),
      query: z.strictObject({ limit: z.coerce.number().max(200).default(100) }),
      answer: { 200: Thing, 202: Thing },
    },
    ({ params, query }) => (params.number === 2 ? reply(202, { number: query.limit }, { 'X-Seen': 'yes' }) : params),
  ),
  route('GET /api/lies', { role: 'reader', answer: { 200: Thing } }, () => ({ number: 'secret' as unknown as number })),
  route('GET /api/away', { role: 'reader', answer: { 200: Thing } }, () => {
    throw Object.assign(new Error('SELECT secret'), { code: 'ECONNREFUSED', errno: -111 })
  }),
  route('GET /api/fault', { role: 'reader', answer: { 200: Thing } }, () => {
    throw new TypeError('secret is not a function')
  }),
  route('POST /api/refusals', { role: 'reader', body: z.strictObject({}), answer: { 200: Thing } }, () => {
    throw new ProblemError('part-missing', 'Cf has no value.', { pointer: '#/values/Cf' }, [
      { code: 'unit-wrong', detail: 'Ri takes ohms.', pointer: '#/values/Ri' },
    ])
  }),
]

const server = makeServer()
let as: (role?: Role) => Client

beforeAll(async () => {
  const { assembly, emailOf } = await testServer()
  const id = (await assembly.people.byEmail(assembly.database.queries, emailOf('editor')))!.id
  const base = await listen(server, '127.0.0.1', 0)
  const app = buildApp({
    log: pino({ level: 'silent' }),
    overHttps: false,
    ownOrigin: base,
    trustProxy: false,
    clientFolder: '/nowhere',
    routes: ROUTES,
    session: [
      (req, _res, next) => {
        const role = req.get('x-test-role') as Role | undefined
        if (role) req.user = { id, name: 'N', email: 'n@poleshelf.example', role }
        next()
      },
    ],
    idempotency: idempotency(assembly.database.queries, () => new Date()),
    databaseIsReady: () => databaseIsReady,
    checkAnswers: true,
  })
  server.on('request', app)
  as = (role) => {
    const client = clientOf(base)
    const request = client.request
    client.request = (method, path, body, headers) =>
      request(method, path, body, { ...headers, ...(role && { 'x-test-role': role }) })
    return client
  }
}, 60_000)
afterAll(() => drain(server))

describe('a declared route', () => {
  it('asks for its role before it reads the body', async () => {
    expect((await as().post('/api/things', '{')).status).toBe(401)
    expect((await as('reader').post('/api/things', '{')).status).toBe(403)
    expect((await as('editor').post('/api/things', '{')).status).toBe(400)
    expect((await as('lead').post('/api/things', { name: 'x' })).status).toBe(201)
  })

  it('reads path and query by their schemas and answers with the status that the handler picks', async () => {
    expect((await as('reader').get('/api/things/1')).body).toEqual({ number: 1 })
    const second = await as('reader').get('/api/things/2?limit=7')
    expect([second.status, second.body, second.headers.get('x-seen')]).toEqual([202, { number: 7 }, 'yes'])
    expect((await as('reader').get('/api/things/x?limit=1e9')).body.errors).toMatchObject([
      { pointer: '#/query/limit' },
    ])
    expect((await as('reader').get('/api/things/x')).body.errors).toMatchObject([{ pointer: '#/path/number' }])
  })

  it('makes one record of 20 equal requests with one key, and refuses the key for another body', async () => {
    const before = made
    const headers = { 'idempotency-key': 'one-and-the-same' }
    const answers = await Promise.all(
      Array.from({ length: 20 }, () => as('editor').post('/api/things', { name: 'x' }, headers)),
    )
    expect(new Set(answers.map((answer) => answer.text))).toEqual(new Set([`{"number":${before + 1}}`]))
    expect(answers.every((answer) => answer.status === 201)).toBe(true)
    expect(made).toBe(before + 1)
    const other = await as('editor').post('/api/things', { name: 'y' }, headers)
    expect([other.status, other.body.type]).toEqual([422, '/problems/key-reused'])
  })

  it('gives every problem of an error its place', async () => {
    const { status, body } = await as('reader').post('/api/refusals', {})
    expect(status).toBe(422)
    expect(body).toMatchObject({
      type: '/problems/part-missing',
      title: 'A part has no value',
      detail: 'Cf has no value.',
      errors: [
        { pointer: '#/values/Cf', detail: 'Cf has no value.' },
        { pointer: '#/values/Ri', detail: 'Ri takes ohms.' },
      ],
    })
  })

  it.each([
    ['/api/fault', 500],
    ['/api/lies', 500],
    ['/api/away', 503],
  ])('tells nothing of what went wrong inside: %s', async (path, status) => {
    const answer = await as('reader').get(path)
    expect(answer.status).toBe(status)
    expect(answer.text).not.toMatch(/secret|SELECT|TypeError|\.ts/)
    expect(answer.body.instance).toMatch(/^\/requests\/[0-9a-f-]{36}$/)
    expect(answer.headers.has('retry-after')).toBe(status === 503)
  })

  it('answers 503 at once while the database is away', async () => {
    databaseIsReady = false
    const answer = await as('reader').get('/api/things/1')
    databaseIsReady = true
    expect([answer.status, answer.body.type]).toEqual([503, '/problems/database-away'])
  })
})
