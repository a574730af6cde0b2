import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { call } from '../../../src/queries/api'
import { listenToApi } from '../../../src/queries/api-events'
import type { ApiProblem } from '../../../src/queries/api-problem'

const Thing = z.strictObject({ value: z.number() })
const told: string[] = []
let signsIn = true

const json = (status: number, body: unknown, headers: Record<string, string> = {}) =>
  new Response(JSON.stringify(body), { status, headers: { 'Content-Type': 'application/json', ...headers } })
const problem = (status: number, code: string, more: object = {}) =>
  json(status, {
    type: `/problems/${code}`,
    title: code,
    status,
    instance: '/requests/1',
    detail: `${code} it is.`,
    ...more,
  })

function answering(...answers: (() => Response | Error)[]) {
  const fetched = vi.fn(async (..._asked: [string, RequestInit]) => {
    const answer = answers[Math.min(fetched.mock.calls.length - 1, answers.length - 1)]!()
    if (answer instanceof Error) throw answer
    return answer
  })
  vi.stubGlobal('fetch', fetched)
  return fetched
}
/** The outcome, with the pauses between repeated calls passed over. */
async function outcome<T>(promise: Promise<T>): Promise<T | ApiProblem> {
  const settled = promise.catch((error: ApiProblem) => error)
  await vi.runAllTimersAsync()
  return settled
}

beforeEach(() => {
  vi.useFakeTimers()
  told.length = 0
  signsIn = true
  listenToApi({
    answered: () => told.push('answered'),
    unreachable: () => told.push('unreachable'),
    databaseAway: () => told.push('database away'),
    signInNeeded: async () => (told.push('sign-in'), signsIn),
  })
})
afterEach(() => {
  vi.useRealTimers()
  vi.unstubAllGlobals()
})

describe('a call', () => {
  it('gives the answer as its contract reads it', async () => {
    const fetched = answering(() => json(200, { value: 3 }))
    expect(await outcome(call('/api/x', { answer: Thing, query: { a: 'b c', none: undefined } }))).toEqual({ value: 3 })
    expect(fetched.mock.calls[0]![0]).toBe('/api/x?a=b+c')
  })

  it('says so when the answer does not fit the contract', async () => {
    answering(() => json(200, { value: 'three' }))
    expect(await outcome(call('/api/x', { answer: Thing }))).toMatchObject({ code: 'answer-not-understood' })
  })

  it('hands on the problem document with the sentence for its field', async () => {
    const errors = [{ pointer: '#/values/Cf', detail: 'Cf has no value.' }]
    const fetched = answering(() => problem(422, 'part-missing', { errors }))
    const failed = await outcome(call('/api/x', { method: 'POST', body: {}, answer: Thing }))
    expect(failed).toMatchObject({ code: 'part-missing', status: 422 })
    expect((failed as ApiProblem).fieldProblem('#/values/Cf')).toBe('Cf has no value.')
    expect(fetched).toHaveBeenCalledTimes(1)
  })

  it('is repeated while the database is away, and tells both', async () => {
    const fetched = answering(
      () => problem(503, 'database-away'),
      () => problem(503, 'database-away'),
      () => json(200, { value: 1 }),
    )
    expect(await outcome(call('/api/x', { answer: Thing }))).toEqual({ value: 1 })
    expect(fetched).toHaveBeenCalledTimes(3)
    expect(told).toEqual(['database away', 'database away', 'answered'])
  })

  it('waits as long as the server asks', async () => {
    const fetched = answering(
      () => problem(503, 'overloaded', {}),
      () => json(200, { value: 1 }),
    )
    fetched.mockImplementationOnce(async () => {
      const document = { type: '/problems/overloaded', title: '', status: 503, instance: '', detail: 'Busy.' }
      return json(503, document, { 'Retry-After': '3' })
    })
    const settled = call('/api/x', { answer: Thing })
    await vi.advanceTimersByTimeAsync(2900)
    expect(fetched).toHaveBeenCalledTimes(1)
    await vi.runAllTimersAsync()
    expect(await settled).toEqual({ value: 1 })
  })

  it('that changes something is not repeated without a key', async () => {
    const fetched = answering(() => new TypeError('network'))
    const failed = await outcome(call('/api/x', { method: 'POST', body: {}, answer: Thing }))
    expect(failed).toMatchObject({ code: 'unreachable' })
    expect(fetched).toHaveBeenCalledTimes(1)
    expect(told).toEqual(['unreachable'])
  })

  it('that changes something is repeated with the same key after a lost answer', async () => {
    const fetched = answering(
      () => new TypeError('network'),
      () => json(201, { value: 7 }),
    )
    const asked = call('/api/x', { method: 'POST', body: { a: 1 }, idempotencyKey: 'key-12345', answer: Thing })
    expect(await outcome(asked)).toEqual({ value: 7 })
    expect(fetched.mock.calls.map(([, { headers }]) => (headers as Record<string, string>)['Idempotency-Key'])).toEqual(
      ['key-12345', 'key-12345'],
    )
  })

  it('gives up in the end and says that the server cannot be reached', async () => {
    const fetched = answering(() => new TypeError('network'))
    expect(await outcome(call('/api/x', { answer: Thing, retries: 2 }))).toMatchObject({ code: 'unreachable' })
    expect(fetched).toHaveBeenCalledTimes(3)
  })

  it('takes an answer of a proxy without a problem document for an absent server', async () => {
    answering(() => new Response('<h1>Bad gateway</h1>', { status: 502 }))
    expect(await outcome(call('/api/x', { answer: Thing, retries: 0 }))).toMatchObject({ code: 'unreachable' })
  })

  it('goes out again as it was once the person has signed in anew', async () => {
    const fetched = answering(
      () => problem(401, 'not-signed-in'),
      () => json(201, { value: 9 }),
    )
    const body = { typed: '4k7' }
    expect(await outcome(call('/api/x', { method: 'POST', body, answer: Thing }))).toEqual({ value: 9 })
    expect(told).toEqual(['answered', 'sign-in', 'answered'])
    expect(fetched.mock.calls[1]![1].body).toBe(fetched.mock.calls[0]![1].body)
  })

  it('fails as it did when the person does not sign in', async () => {
    signsIn = false
    const fetched = answering(() => problem(401, 'not-signed-in'))
    expect(await outcome(call('/api/x', { answer: Thing }))).toMatchObject({ code: 'not-signed-in' })
    expect(fetched).toHaveBeenCalledTimes(1)
  })

  it('of sign-in itself opens no dialog', async () => {
    answering(() => problem(401, 'not-signed-in'))
    await outcome(call('/api/me', { answer: Thing, asksToSignIn: false }))
    expect(told).not.toContain('sign-in')
  })
})
