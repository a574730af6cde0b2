import { afterAll, beforeAll, expect, it } from 'vitest'
import { migratedDatabase } from '../../support/database'
import { testServer, type TestServer } from '../../support/server'

let server: TestServer
let user: string

beforeAll(async () => {
  const database = await migratedDatabase()
  const runtime = new URL(database.url)
  user = runtime.username = `run_${database.name.slice(-8)}`
  runtime.password = 'a password of its own'
  server = await testServer({ database, environment: { DATABASE_RUNTIME_URL: runtime.href, DATABASE_POOL: '1' } })
}, 60_000)
afterAll(() => server.database.root.query(`DROP USER IF EXISTS '${user}'@'%'`))

it('serves with an account that has the least rights, over one connection', async () => {
  const clients = await Promise.all((['reader', 'editor', 'lead'] as const).map((role) => server.signedIn(role)))
  const statuses = await Promise.all(clients.map(async (client) => (await client.get('/api/me')).status))
  expect(statuses).toEqual([200, 200, 200])
  expect((await clients[0]!.post('/api/sign-out')).status).toBe(204)
})

it('grants neither DROP nor GRANT nor anything beyond the tables', async () => {
  const [rows] = await server.database.root.query(`SHOW GRANTS FOR '${user}'@'%'`)
  const grants = (rows as Record<string, string>[]).map((row) => Object.values(row)[0]!)
  expect(grants.join('\n')).not.toMatch(/DROP|GRANT OPTION|FILE|SUPER|ALL PRIVILEGES|CREATE|ALTER/)
  expect(grants.find((grant) => grant.includes('`sizings`'))).toMatch(/^GRANT SELECT, INSERT ON/)
})
