import { beforeAll, describe, expect, it } from 'vitest'
import { clientOf, PASSWORD, testServer, type TestServer } from '../../support/server'

let server: TestServer

beforeAll(async () => {
  server = await testServer()
}, 60_000)

const reader = (password: string) => ({ email: server.emailOf('reader'), password })
const sessionRows = async () =>
  (await server.database.root.query('SELECT * FROM sessions'))[0] as Record<string, unknown>[]

describe('sign-in', () => {
  it('says who came in, and says it again while the session lasts', async () => {
    const client = await server.signedIn('lead')
    expect((await client.get('/api/me')).body).toEqual({
      name: 'Test lead',
      email: 'lead@poleshelf.example',
      role: 'lead',
    })
  })

  it('takes the e-mail in any case and the password only as it is', async () => {
    const client = server.stranger()
    expect((await client.post('/api/sign-in', { email: 'READER@Poleshelf.example', password: PASSWORD })).status).toBe(
      200,
    )
    expect((await client.post('/api/sign-in', reader(PASSWORD.toUpperCase()))).status).toBe(401)
    expect((await client.post('/api/sign-in', reader(`${PASSWORD} `))).status).toBe(401)
  })

  it('reads passwords to their last letter, past the 72 bytes of the hash function', async () => {
    const { people, database, hasher } = server.assembly
    const long = 'é'.repeat(64)
    const passwordHash = await hasher.hash(long)
    await people.insert(database.queries, {
      email: 'long@poleshelf.example',
      name: 'L',
      role: 'reader',
      passwordHash,
      createdAt: new Date(),
    })
    const status = async (password: string) =>
      (await server.stranger().post('/api/sign-in', { email: 'long@poleshelf.example', password })).status
    expect(await status(long)).toBe(200)
    expect(await status(`${'é'.repeat(63)}e`)).toBe(401)
  })

  it('answers alike for a wrong password, an unknown and a disabled account', async () => {
    const { people, database, hasher } = server.assembly
    const passwordHash = await hasher.hash(PASSWORD)
    await people.insert(database.queries, {
      email: 'gone@poleshelf.example',
      name: 'G',
      role: 'reader',
      passwordHash,
      createdAt: new Date(),
      disabledAt: new Date(),
    })
    const answers = []
    for (const [email, password] of [
      [server.emailOf('editor'), 'wrong'],
      ['unknown@poleshelf.example', 'wrong'],
      ['gone@poleshelf.example', PASSWORD],
    ]) {
      const { status, body } = await server.stranger().post('/api/sign-in', { email, password })
      answers.push({ status, ...body, instance: '' })
    }
    expect(answers[1]).toEqual(answers[0])
    expect(answers[2]).toEqual(answers[0])
    expect(answers[0]).toMatchObject({ status: 401, type: '/problems/sign-in-failed' })
  })

  it('renews the session id, and never takes over one that was planted', async () => {
    const client = clientOf(server.base, 'poleshelf=s%3Aplanted.signature')
    expect((await client.post('/api/sign-in', reader(PASSWORD))).status).toBe(200)
    const first = client.cookie()
    expect(first).not.toContain('planted')
    expect((await client.post('/api/sign-in', reader(PASSWORD))).status).toBe(200)
    expect(client.cookie()).not.toBe(first)
    expect((await clientOf(server.base, first).get('/api/me')).status).toBe(401)
  })

  it('keeps ids hashed, with where the session came from', async () => {
    const client = await server.signedIn('editor')
    const id = decodeURIComponent(client.cookie().split('=')[1]!).slice(2).split('.')[0]!
    expect(id.length).toBeGreaterThanOrEqual(22)
    const rows = await sessionRows()
    expect(JSON.stringify(rows)).not.toContain(id)
    expect(rows.at(-1)).toMatchObject({ address: '127.0.0.1', id_hash: expect.stringMatching(/^[0-9a-f]{64}$/) })
  })

  it('sets a cookie for this host that scripts cannot read', async () => {
    const answer = await server.stranger().post('/api/sign-in', reader(PASSWORD))
    expect(answer.headers.getSetCookie()).toEqual([
      expect.stringMatching(/^poleshelf=[^;]+; Path=\/; HttpOnly; SameSite=Lax$/),
    ])
    expect(answer.text).not.toContain(decodeURIComponent(answer.headers.getSetCookie()[0]!).slice(12, 44))
  })

  it('keeps no session for whoever does not sign in', async () => {
    const before = (await sessionRows()).length
    const answer = await server.stranger().get('/api/me')
    expect(answer.headers.getSetCookie()).toEqual([])
    await server.stranger().post('/api/sign-in', reader('wrong'))
    expect((await sessionRows()).length).toBe(before)
  })
})

describe('over https', () => {
  it('the cookie has the __Host- prefix and Secure, and only a configured proxy says https', async () => {
    const behind = await testServer({
      database: server.database,
      environment: { BASE_URL: 'https://poleshelf.example', TRUST_PROXY: 'loopback' },
    })
    const headers = { 'x-forwarded-proto': 'https' }
    const answer = await behind.stranger().post('/api/sign-in', reader(PASSWORD), headers)
    expect(answer.headers.getSetCookie()).toEqual([
      expect.stringMatching(/^__Host-poleshelf=[^;]+; Path=\/; HttpOnly; Secure; SameSite=Lax$/),
    ])
    expect(answer.headers.get('strict-transport-security')).toContain('max-age')
    const direct = await server.stranger().post('/api/sign-in', reader(PASSWORD), headers)
    expect(direct.headers.getSetCookie()[0]).toMatch(/^poleshelf=/)
  }, 30_000)
})

describe('the end of a session', () => {
  it('is at once and for good at sign-out, on every node', async () => {
    const other = await testServer({ database: server.database })
    const client = await server.signedIn('reader')
    const replay = clientOf(other.base, client.cookie())
    expect((await replay.get('/api/me')).status).toBe(200)
    expect((await client.post('/api/sign-out')).status).toBe(204)
    expect((await replay.get('/api/me')).status).toBe(401)
  }, 30_000)

  it('is at once when the person is disabled', async () => {
    const client = await server.signedIn('editor')
    await server.database.root.query("UPDATE people SET disabled_at = NOW() WHERE email = 'editor@poleshelf.example'")
    expect((await client.get('/api/me')).status).toBe(401)
    await server.database.root.query("UPDATE people SET disabled_at = NULL WHERE email = 'editor@poleshelf.example'")
  })

  it('comes after the idle limit, and after the absolute one whatever is done', async () => {
    let clockMs = Date.now()
    const timed = await testServer({
      database: server.database,
      environment: { SESSION_IDLE_SECONDS: '100', SESSION_ABSOLUTE_SECONDS: '300' },
      options: { now: () => new Date(clockMs) },
    })
    const after = async (client: Awaited<ReturnType<TestServer['signedIn']>>, seconds: number) => {
      clockMs += seconds * 1000
      const { status } = await client.get('/api/me')
      await new Promise((done) => setTimeout(done, 40))
      return status
    }
    const idle = await timed.signedIn('reader')
    expect(await after(idle, 90)).toBe(200)
    expect(await after(idle, 90)).toBe(200)
    expect(await after(idle, 101)).toBe(401)
    const busy = await timed.signedIn('reader')
    for (const seconds of [80, 80, 80]) expect(await after(busy, seconds)).toBe(200)
    expect(await after(busy, 61)).toBe(401)
  }, 30_000)
})

describe('guessing', () => {
  it('is stopped by the eleventh try over both nodes, while the owner gets in from elsewhere', async () => {
    const environment = { TRUST_PROXY: 'loopback' }
    const nodes = [await testServer({ environment })]
    nodes.push(await testServer({ environment, database: nodes[0]!.database }))
    const tryFrom = (address: string, index: number, password: string) =>
      nodes[index % 2]!.stranger().post(
        '/api/sign-in',
        { email: 'lead@poleshelf.example', password },
        { 'x-forwarded-for': address },
      )
    const statuses: number[] = []
    let retryAfter: string | null = null
    for (let index = 0; index < 14; index += 1) {
      const answer = await tryFrom('192.0.2.1', index, 'guess')
      statuses.push(answer.status)
      retryAfter = answer.headers.get('retry-after')
    }
    expect(statuses).toEqual([...Array.from({ length: 10 }, () => 401), 429, 429, 429, 429])
    expect(Number(retryAfter)).toBeGreaterThan(60)
    expect((await tryFrom('192.0.2.1', 0, PASSWORD)).status).toBe(429)
    expect((await tryFrom('192.0.2.2', 0, PASSWORD)).status).toBe(200)
    const later = await testServer({ environment, database: nodes[0]!.database })
    const again = { email: 'lead@poleshelf.example', password: PASSWORD }
    expect((await later.stranger().post('/api/sign-in', again, { 'x-forwarded-for': '192.0.2.1' })).status).toBe(429)
  }, 60_000)

  it('is not made cheaper by a header that no proxy set', async () => {
    const direct = await testServer()
    const statuses: number[] = []
    for (let index = 0; index < 11; index += 1)
      statuses.push(
        (
          await direct
            .stranger()
            .post(
              '/api/sign-in',
              { email: 'lead@poleshelf.example', password: 'guess' },
              { 'x-forwarded-for': `192.0.2.${index}` },
            )
        ).status,
      )
    expect(statuses.at(-1)).toBe(429)
  }, 60_000)
})
