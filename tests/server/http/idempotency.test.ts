import { beforeAll, describe, expect, it } from 'vitest'
import { idempotency, requestHash } from '../../../src-server/http/idempotency'
import { testServer, type TestServer } from '../../support/server'

let server: TestServer
let personId: number
const now = () => new Date()

beforeAll(async () => {
  server = await testServer()
  personId = (await server.assembly.people.byEmail(server.assembly.database.queries, server.emailOf('reader')))!.id
}, 60_000)

describe('a request with a key', () => {
  const hash = requestHash('POST', '/api/things', { a: 1 })

  it('is worked on once when it comes 20 times at once, over two nodes', async () => {
    const nodes = [1, 2].map(() => idempotency(server.assembly.database.queries, now))
    let made = 0
    const work = async () => {
      await new Promise((done) => setTimeout(done, 50))
      made += 1
      return { status: 201, body: { number: made } }
    }
    const answers = await Promise.all(
      Array.from({ length: 20 }, (_, index) => nodes[index % 2]!.once(personId, 'twenty-at-once', hash, work)),
    )
    expect(made).toBe(1)
    expect(answers).toEqual(Array.from({ length: 20 }, () => ({ status: 201, body: { number: 1 } })))
  })

  it('is refused when the key came with another request', async () => {
    const keys = idempotency(server.assembly.database.queries, now)
    await keys.once(personId, 'used-before', hash, async () => ({ status: 200, body: 1 }))
    const other = requestHash('POST', '/api/things', { a: 2 })
    await expect(
      keys.once(personId, 'used-before', other, async () => ({ status: 200, body: 2 })),
    ).rejects.toMatchObject({
      code: 'key-reused',
    })
  })

  it('may be mended and sent again after it was refused', async () => {
    const keys = idempotency(server.assembly.database.queries, now)
    const refused = keys.once(personId, 'refused-once', hash, async () => {
      throw new Error('no')
    })
    await expect(refused).rejects.toThrow('no')
    const again = await keys.once(personId, 'refused-once', requestHash('POST', '/', 3), async () => ({
      status: 200,
      body: 3,
    }))
    expect(again.body).toBe(3)
  })

  it('is taken over when the node that worked on it died', async () => {
    const dead = idempotency(server.assembly.database.queries, () => new Date(Date.now() - 60_000))
    void dead.once(personId, 'node-died', hash, () => new Promise(() => {}))
    await new Promise((done) => setTimeout(done, 100))
    const keys = idempotency(server.assembly.database.queries, now)
    expect(await keys.once(personId, 'node-died', hash, async () => ({ status: 200, body: 4 }))).toEqual({
      status: 200,
      body: 4,
    })
  })
})
