import pRetry, { AbortError } from 'p-retry'
import type { z } from 'zod'
import { ProblemDocument } from '#shared/contracts/problem'
import { tell } from './api-events'
import { ApiProblem, answerNotUnderstood, unreachable } from './api-problem'

export interface Call<A extends z.ZodType | null> {
  method?: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE'
  /** Sent as JSON. */
  body?: unknown
  /** Absent values are left out. */
  query?: Record<string, string | number | undefined>
  /** Contract of the answer; null where it has no body. */
  answer: A
  /** Makes a repeated call safe: the server answers with what the first one did. */
  idempotencyKey?: string
  signal?: AbortSignal
  /** Whether the sign-in dialog opens when the session has ended; off for the calls of sign-in itself. */
  asksToSignIn?: boolean
  /** How often a call is repeated that got no answer or a 503; only reads and calls with a key are. */
  retries?: number
}

const RETRIES = 4
const FIRST_PAUSE_MS = 400

/**
 * Calls the server and reads its answer by the contract.
 *
 * Reads, and changes with an idempotency key, are repeated with growing pauses while the server or its database is
 * away. When the session has ended, the person signs in over the page and the same call goes out again.
 *
 * @param path under the own address, such as `/api/blocks`
 * @throws {ApiProblem} with the server's problem document, or 'unreachable', or 'answer-not-understood'
 * @throws {DOMException} 'AbortError' when the signal ended it
 */
export async function call<A extends z.ZodType | null>(
  path: string,
  options: Call<A>,
): Promise<A extends z.ZodType ? z.output<A> : void> {
  const { method = 'GET', idempotencyKey, retries = RETRIES, signal, asksToSignIn = true } = options
  const isRepeatable = method === 'GET' || idempotencyKey !== undefined
  const attempt = async () => {
    try {
      return await send(path, method, options)
    } catch (error) {
      if (!(error instanceof ApiProblem) || !isPassing(error)) throw new AbortError(error as Error)
      await pause(error.retryAfterMs ?? 0, signal)
      throw error
    }
  }
  const repeated = () =>
    isRepeatable
      ? pRetry(attempt, {
          retries,
          minTimeout: FIRST_PAUSE_MS,
          factor: 2,
          randomize: true,
          shouldRetry: ({ error }) => error instanceof ApiProblem,
          ...(signal && { signal }),
        })
      : send(path, method, options)
  const answer = await repeated().catch(async (error: unknown) => {
    const needsSignIn = asksToSignIn && error instanceof ApiProblem && error.code === 'not-signed-in'
    if (!needsSignIn || !(await tell.signInNeeded())) throw error
    return repeated()
  })
  return read(answer.body, answer.status, options.answer) as A extends z.ZodType ? z.output<A> : void
}

const isPassing = (problem: ApiProblem): boolean => problem.code === 'unreachable' || problem.status === 503

async function send(path: string, method: string, { body, query, idempotencyKey, signal }: Call<z.ZodType | null>) {
  const response = await fetch(addressOf(path, query), {
    method,
    credentials: 'same-origin',
    cache: 'no-store',
    headers: {
      Accept: 'application/json, application/problem+json',
      ...(body !== undefined && { 'Content-Type': 'application/json' }),
      ...(idempotencyKey !== undefined && { 'Idempotency-Key': idempotencyKey }),
    },
    ...(body !== undefined && { body: JSON.stringify(body) }),
    ...(signal && { signal }),
  }).catch((error: unknown) => {
    if (signal?.aborted) throw error
    tell.unreachable()
    throw unreachable()
  })
  const content: unknown = response.status === 204 ? null : await response.json().catch(() => undefined)
  if (!response.ok) throw problemOf(response, content)
  tell.answered()
  return { status: response.status, body: content }
}

function problemOf(response: Response, content: unknown): ApiProblem {
  const read = ProblemDocument.safeParse(content)
  // A proxy in front of a server that is away answers without a problem document.
  if (!read.success) {
    if (response.status < 502) return answerNotUnderstood(response.status)
    tell.unreachable()
    return unreachable()
  }
  const code = read.data.type.replace(/^.*\/problems\//, '')
  if (code === 'database-away') tell.databaseAway(read.data.detail)
  else tell.answered()
  return new ApiProblem(code, response.status, read.data, retryAfterMs(response.headers.get('Retry-After')))
}

const retryAfterMs = (header: string | null): number | null =>
  header !== null && /^\d{1,5}$/.test(header) ? Math.min(Number(header), 10) * 1000 : null

function read(content: unknown, status: number, contract: z.ZodType | null): unknown {
  if (contract === null) return undefined
  const reading = contract.safeParse(content)
  if (!reading.success) throw answerNotUnderstood(status)
  return reading.data
}

function addressOf(path: string, query: Call<null>['query'] = {}): string {
  const asked = new URLSearchParams()
  for (const [name, value] of Object.entries(query)) if (value !== undefined) asked.set(name, String(value))
  return asked.size === 0 ? path : `${path}?${asked}`
}

function pause(ms: number, signal?: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    const timer = setTimeout(resolve, ms)
    signal?.addEventListener('abort', () => (clearTimeout(timer), resolve()), { once: true })
  })
}
