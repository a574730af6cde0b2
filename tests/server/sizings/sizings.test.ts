import { beforeAll, describe, expect, it } from 'vitest'
import type { Sizing } from '#shared/contracts/sizings'
import type { Answer, Client, TestServer } from '../../support/server'
import { testServer } from '../../support/server'
import { houseBlock, putRevision, shelfServer } from '../../support/shelf'

let server: TestServer
let reader: Client
let key = 0

const TARGETS = { f_c: '2.4 kHz', K: -2 }
const body = (more: object = {}) => ({ block: 'lp1-inv', revision: 1, targets: TARGETS, ...more })
const newKey = () => `test-key-${++key}`
const save = (more: object = {}, by: Client = reader): Promise<Answer> =>
  by.post('/api/sizings', body(more), { 'idempotency-key': newKey() })
const saved = async (more: object = {}): Promise<Sizing> => {
  const answer = await save(more)
  expect(answer.status, answer.text).toBe(201)
  return answer.body as Sizing
}

beforeAll(async () => {
  server = await shelfServer()
  reader = await server.signedIn('reader')
}, 90_000)

describe('a saved sizing', () => {
  it('has a number, the permanent link and all that it was made of', async () => {
    const sizing = await saved({ note: 'For the vibration board.', conditions: { sourceOhm: '50' } })
    expect(sizing.number).toMatch(/^S-[1-9]\d*$/)
    expect(sizing).toMatchObject({
      link: `${server.base}/sizings/${sizing.number}`,
      titleBlock: { code: 'lp1-inv', revision: 1, status: 'approved' },
      statusNow: 'approved',
      newerRevision: null,
      conditions: { sourceOhm: 50 },
      note: 'For the vibration board.',
      savedBy: 'Test reader',
      limitsNotKept: [],
      selfCheck: { outcome: 'agrees' },
    })
    expect(
      Object.values(sizing.outcome.parts)
        .map((part) => part.state)
        .sort(),
    ).toEqual(['free', 'solved', 'solved'])
    expect(sizing.outcome.results['f_c']).toMatchObject({ target: 2400 })
    expect(sizing.testTable).toHaveLength(3)
    expect(sizing.phaseRad).toHaveLength(sizing.response.frequenciesHz.length)
  })

  it('opens by its number in either case, the same for everyone', async () => {
    const sizing = await saved()
    for (const role of ['reader', 'editor', 'lead'] as const) {
      const opened = await (await server.signedIn(role)).get(`/api/sizings/${sizing.number.toLowerCase()}`)
      expect(opened.status).toBe(200)
      expect(opened.body).toEqual(sizing)
    }
    expect((await reader.get('/api/sizings/S-999999')).status).toBe(404)
    for (const path of ['S-0', '12', 'S-1e3', 'S--1', 'S-9999999999'])
      expect([400, 404, 422]).toContain((await reader.get(`/api/sizings/${path}`)).status)
  })

  it('keeps each double exactly', async () => {
    const values = { Ri: 22101.3 + 0.1 + 0.2, Rf: 44199.99999999999, Cf: 1.5000000000000002e-9 }
    const sizing = await saved({ values, targets: {} })
    expect(sizing.outcome.values).toEqual(values)
    expect((await reader.get(`/api/sizings/${sizing.number}`)).body.outcome.values).toEqual(values)
    expect(sizing.outcome.parts['Ri']!.inStock).toBe(false)
  })

  it('stays as it was while its revision goes on, and tells of it', async () => {
    const text = houseBlock('lp1-ni').replaceAll('lp1-ni', 'lp9-sized')
    await putRevision(server, text, { number: 1, status: 'in review' })
    const sizing = await saved({ block: 'lp9-sized', targets: { f_c: 1000, K: 4 } })
    expect(sizing).toMatchObject({ statusNow: 'in review', titleBlock: { status: 'in review' }, newerRevision: null })
    await server.assembly.database.transaction((tx) =>
      tx.execute(`update revisions set status = 'returned' where id = (select max(id) from revisions)`),
    )
    await putRevision(server, text.replace('title: Non', 'title: Newer non'), { number: 2, status: 'approved' })
    const opened = (await reader.get(`/api/sizings/${sizing.number}`)).body as Sizing
    expect(opened).toEqual({ ...sizing, statusNow: 'returned', newerRevision: 2 })
    expect((await save({ block: 'lp9-sized', targets: { f_c: 1000 } })).status).toBe(404)
  })
})

describe('what a client sends', () => {
  it('is computed again: doctored results are refused, doctored values are only values', async () => {
    for (const doctored of [
      { outcome: { results: { f_c: { value: 2400 } } } },
      { results: { f_c: 2400 } },
      { limitsNotKept: [] },
      { selfCheck: { outcome: 'agrees' } },
      { number: 'S-1' },
      { savedBy: 'Somebody' },
      { engineVersion: '9' },
    ]) {
      const answer = await save(doctored)
      expect([400, 422]).toContain(answer.status)
      expect(answer.body.errors[0].pointer).toBe(`#/${Object.keys(doctored)[0]}`)
    }
    const held = { Ri: 10e3, Rf: 20e3, Cf: 1e-9 }
    const { outcome, response } = await saved({ values: held })
    // f_c = 1/(2π·20 kΩ·1 nF), K = −2: the formulas of the trade, not what was asked.
    expect(outcome.results['f_c']!.value / 7957.747154594767).toBeCloseTo(1, 12)
    expect(outcome.results['K']!.value).toBeCloseTo(-2, 12)
    const computed = await reader.post('/api/blocks/lp1-inv/revisions/1/compute', {
      values: held,
      targets: TARGETS,
      frequenciesHz: response.frequenciesHz,
    })
    expect(computed.body.response).toEqual(response)
    expect(computed.body.results).toEqual(outcome.results)
  })

  it('outside a limit needs a reason, which is kept with the limit', async () => {
    const outside = { values: { Ri: 100, Rf: 10e3, Cf: '1n' }, targets: {} }
    const refused = await save(outside)
    expect(refused.status).toBe(422)
    expect(refused.body).toMatchObject({ type: '/problems/limit-without-reason', errors: [{ pointer: '#/reason' }] })
    expect((await save({ ...outside, reason: '   ' })).status).toBe(422)
    const sizing = await saved({ ...outside, reason: 'The source is a buffer of 1 Ω.' })
    expect(sizing.reason).toBe('The source is a buffer of 1 Ω.')
    expect(sizing.limitsNotKept.map((limit) => limit.level)).toEqual(expect.arrayContaining(['warning']))
    expect(sizing.limitsNotKept.map((limit) => limit.say).join(' ')).toContain('100')
  })

  it.each([
    [{ block: 'nothing' }, 404],
    [{ revision: 99 }, 404],
    [{ revision: 0 }, 422],
    [{ revision: 1.5 }, 422],
    [{ revision: null }, 422],
    [{ values: { Rf: '4.7 nF' } }, 422],
    [{ values: { Rx: 1 } }, 422],
    [{ note: 'x'.repeat(2001) }, 422],
    [{ note: 5 }, 422],
    [{ reason: 'x'.repeat(501) }, 422],
    [{ goodEnough: -1 }, 422],
    [{ series: { Rf: 'E13' } }, 422],
    [{ conditions: { sourceOhm: -1 } }, 422],
  ])('%j is answered with a problem', async (more, status) => {
    const answer = await save(more)
    expect(answer.status === status || (status === 422 && answer.status === 400), answer.text).toBe(true)
    expect(answer.headers.get('content-type')).toContain('problem+json')
  })

  // RELIABILITY of text: what was typed comes back as it was.
  it.each([
    'emoji 🦓 and 𝄞',
    'e\u0301 and é',
    '\u200fאב\u200e',
    'a\u200bb',
    'µ and μ',
    'Ω and Ω',
    "'; drop table sizings; --",
    '<script>alert(1)</script>',
    '{{7*7}}',
    'a\nb\tc',
  ])('keeps the note %j exactly', async (note) => {
    const sizing = await saved({ note })
    expect((await reader.get(`/api/sizings/${sizing.number}`)).body.note).toBe(note)
  })

  it.each(['a\u0000b', 'a\ud800b'])('keeps the note %j exactly or refuses it in words', async (note) => {
    const answer = await save({ note })
    if (answer.status === 201) expect((await reader.get(`/api/sizings/${answer.body.number}`)).body.note).toBe(note)
    else expect(answer.status).toBeLessThan(500)
  })
})

describe('a repeated save', () => {
  it('under one key makes one sizing and gives the same answer', async () => {
    const headers = { 'idempotency-key': newKey() }
    const first = await reader.post('/api/sizings', body(), headers)
    const second = await reader.post('/api/sizings', body(), headers)
    expect([first.status, second.status]).toEqual([201, 201])
    expect(second.body).toEqual(first.body)
  })

  it('twenty at once makes one', async () => {
    const headers = { 'idempotency-key': newKey() }
    const before = (await reader.get('/api/sizings?limit=1')).body.rows[0].number
    const answers = await Promise.all(Array.from({ length: 20 }, () => reader.post('/api/sizings', body(), headers)))
    expect(new Set(answers.map((answer) => `${answer.status} ${answer.body.number}`)).size).toBe(1)
    const rows = (await reader.get('/api/sizings')).body.rows as { number: string }[]
    expect(rows.findIndex((row) => row.number === before)).toBe(1)
  }, 60_000)

  it('with another body under the same key is refused', async () => {
    const headers = { 'idempotency-key': newKey() }
    await reader.post('/api/sizings', body(), headers)
    const other = await reader.post('/api/sizings', body({ note: 'another' }), headers)
    expect(other.status).toBe(422)
    expect(other.body.type).toBe('/problems/key-reused')
  })

  it('by another person under the same key is their own', async () => {
    const headers = { 'idempotency-key': newKey() }
    const mine = await reader.post('/api/sizings', body(), headers)
    const theirs = await (await server.signedIn('editor')).post('/api/sizings', body(), headers)
    expect(theirs.status).toBe(201)
    expect(theirs.body.number).not.toBe(mine.body.number)
  })

  it('after the answer was lost finds the first, also when the kept answer is gone', async () => {
    const headers = { 'idempotency-key': newKey() }
    const first = await reader.post('/api/sizings', body(), headers)
    await server.assembly.database.transaction((tx) => tx.execute('delete from idempotency_keys'))
    const second = await reader.post('/api/sizings', body(), headers)
    expect(second.body.number).toBe(first.body.number)
  })
})

describe('numbers', () => {
  it('of many saves at once over three nodes are all different, and each opens its own sizing', async () => {
    const nodes = [
      server,
      await testServer({ database: server.database }),
      await testServer({ database: server.database }),
    ]
    const clients = await Promise.all(nodes.map((node) => node.signedIn('reader')))
    const answers = await Promise.all(
      Array.from({ length: 60 }, (_, k) => save({ note: `save ${k}` }, clients[k % clients.length]!)),
    )
    expect(new Set(answers.map((answer) => answer.status))).toEqual(new Set([201]))
    const numbers = answers.map((answer) => answer.body.number as string)
    expect(new Set(numbers).size).toBe(60)
    for (const [k, number] of numbers.entries())
      expect((await clients[(k + 1) % 3]!.get(`/api/sizings/${number}`)).body.note).toBe(`save ${k}`)
  }, 120_000)

  it('are not used again after a save that was undone', async () => {
    const { database } = server.assembly
    const before = Number((await saved()).number.slice(2))
    const undone = database.transaction(async (tx) => {
      await tx.execute('update counters set value = value')
      throw new Error('undone')
    })
    await expect(undone).rejects.toThrow()
    expect(Number((await saved()).number.slice(2))).toBeGreaterThan(before)
  })
})

describe('the list', () => {
  it('is newest first, by pages, and narrows to a block and to one’s own', async () => {
    const other = await server.signedIn('lead')
    await save({ block: 'lp2-mfb', targets: { K: -2 } }, other)
    const all = (await reader.get('/api/sizings?limit=200')).body.rows as {
      number: string
      block: string
      savedBy: string
    }[]
    const numbers = all.map((row) => Number(row.number.slice(2)))
    expect(numbers).toEqual([...numbers].sort((a, b) => b - a))
    const { rows, next } = (await reader.get('/api/sizings?limit=2')).body
    const { rows: more } = (await reader.get(`/api/sizings?limit=2&before=${next}`)).body
    expect([...rows, ...more]).toEqual(all.slice(0, 4))
    const mfb = (await reader.get('/api/sizings?block=LP2-MFB')).body.rows as { block: string }[]
    expect(mfb.length).toBeGreaterThan(0)
    expect(mfb.every((row) => row.block === 'lp2-mfb')).toBe(true)
    const mine = (await other.get('/api/sizings?mine=true')).body.rows as { savedBy: string }[]
    expect(new Set(mine.map((row) => row.savedBy))).toEqual(new Set(['Test lead']))
  })

  it.each(['limit=0', 'limit=1000000000', 'before=x', 'sort=note', 'mine=perhaps'])('refuses %s', async (query) => {
    expect([400, 422]).toContain((await reader.get(`/api/sizings?${query}`)).status)
  })
})

describe('checking again', () => {
  it('finds nothing with the same engine', async () => {
    const { number } = await saved()
    const answer = await reader.post(`/api/sizings/${number}/check`, {})
    expect(answer.status, answer.text).toBe(200)
    expect(answer.body.differences).toEqual([])
    expect(answer.body.engineVersion).toBe(answer.body.storedEngineVersion)
  })

  it('lists what an older engine had given differently, and changes nothing', async () => {
    const { number } = await saved()
    const digits = number.slice(2)
    await server.assembly.database.transaction((tx) =>
      tx.execute(
        `update sizings set outcome = json_set(outcome, '$.results.f_c.value', 2399.0) where number = ${digits}`,
      ),
    )
    const { differences } = (await reader.post(`/api/sizings/${number}/check`, {})).body
    expect(differences).toHaveLength(1)
    expect(differences[0]).toMatchObject({ name: 'f_c', stored: 2399 })
    expect((await reader.get(`/api/sizings/${number}`)).body.outcome.results.f_c.value).toBe(2399)
  })
})
