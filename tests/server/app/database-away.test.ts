import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import mysql from 'mysql2/promise'
import { throwAwayServer, type ThrowAwayServer } from '../../support/database'
import { serverProcess, statusOf, until, type ServerProcess } from '../../support/process'
import { clientOf, type Client } from '../../support/server'

let database: ThrowAwayServer
let server: ServerProcess
let client: Client

const ready = async () => (await statusOf(`${server.base}/health/ready`)) === 200

beforeAll(async () => {
  database = await throwAwayServer()
  database.signal('SIGKILL')
  server = await serverProcess({ DATABASE_URL: `${database.url}away` })
  client = clientOf(server.base)
}, 60_000)
afterAll(() => database.stop())

describe('a server whose database is away', () => {
  it('starts, says what is the matter, and is ready once the database is there', async () => {
    expect(await statusOf(`${server.base}/health/live`)).toBe(200)
    const answer = await clientOf(server.base).get('/health/ready')
    expect([answer.status, answer.body.type]).toEqual([503, '/problems/database-away'])
    const refused = await client.post('/api/sign-in', { email: 'a@b.c', password: 'x' })
    expect([refused.status, refused.body.type]).toEqual([503, '/problems/database-away'])
    expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(0)
    await database.start()
    await until(ready, 10_000)
    const { email, password } = server.accounts()[0]!
    expect((await client.post('/api/sign-in', { email, password })).status).toBe(200)
  }, 60_000)

  it('answers 503 within 10 s while the database is frozen, and is ready within 5 s afterwards', async () => {
    database.signal('SIGSTOP')
    const beforeMs = Date.now()
    const statuses = await Promise.all(Array.from({ length: 30 }, async () => (await client.get('/api/me')).status))
    expect(new Set(statuses)).toEqual(new Set([503]))
    expect(Date.now() - beforeMs).toBeLessThan(10_000)
    const askedMs = Date.now()
    expect((await client.get('/api/me')).status).toBe(503)
    expect(Date.now() - askedMs).toBeLessThan(500)
    expect(await statusOf(`${server.base}/health/live`)).toBe(200)
    database.signal('SIGCONT')
    expect(await until(ready, 5_000)).toBeLessThan(5_000)
    expect((await client.get('/api/me')).status).toBe(200)
  }, 60_000)

  it('comes back by itself after kill -9 of the database, with the sessions kept', async () => {
    database.signal('SIGKILL')
    await until(async () => (await client.get('/api/me')).status === 503, 10_000)
    await database.start()
    await until(ready, 10_000)
    expect((await client.get('/api/me')).status).toBe(200)
  }, 60_000)

  it('shows nothing of connections that the database closed for resting', async () => {
    const root = await mysql.createConnection(database.url)
    await Promise.all(Array.from({ length: 10 }, () => client.get('/api/me')))
    const [rows] = await root.query<mysql.RowDataPacket[]>(
      "SELECT id FROM information_schema.processlist WHERE db = 'away'",
    )
    for (const { id } of rows) await root.query(`KILL ${id}`).catch(() => {})
    root.destroy()
    const statuses = await Promise.all(Array.from({ length: 50 }, async () => (await client.get('/api/me')).status))
    expect(new Set(statuses)).toEqual(new Set([200]))
  }, 60_000)
})

describe('an orderly stop', () => {
  it('says not ready first, answers what is under way, and ends with 0 within 10 s', async () => {
    const { email, password } = server.accounts()[1]!
    const underWay = Array.from({ length: 6 }, () => clientOf(server.base).post('/api/sign-in', { email, password }))
    await until(async () => (await statusOf(`${server.base}/health/live`)) === 200, 1000)
    server.signal('SIGTERM')
    await until(async () => (await statusOf(`${server.base}/health/ready`)) === 503, 1000)
    const { code, tookMs } = await server.exit()
    expect((await Promise.all(underWay)).map((answer) => answer.status)).toEqual(Array.from({ length: 6 }, () => 200))
    expect(code).toBe(0)
    expect(tookMs).toBeLessThan(10_000)
  }, 60_000)

  it('leaves a log in which every line is JSON and nothing secret stands', () => {
    const text = JSON.stringify(server.log())
    expect(text).toContain('database back')
    for (const { password } of server.accounts()) expect(text).not.toContain(password)
    expect(text).not.toContain(client.cookie().split('=')[1])
  })
})
