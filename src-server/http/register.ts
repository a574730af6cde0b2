import express, { type Express, type RequestHandler } from 'express'
import { z } from 'zod'
import { ROLES } from '#shared/contracts/names'
import { ProblemError } from '#shared/problems'
import type { SignedIn } from '../people'
import { idempotencyKeyOf, requestHash, type Idempotency } from './idempotency'
import { Reply, type Route, type RouteRole } from './route'
import { requireSameSite } from './same-site'
import { validated } from './validation'

const JSON_TYPE = ['application/json']
const NOTHING = z.strictObject({})

export interface RegisterNeeds {
  ownOrigin: string
  /** Opens the session and finds the person; not run for routes that need neither. */
  session: RequestHandler[]
  idempotency: Idempotency
  /** Whether the database may be asked. */
  databaseIsReady: () => boolean
  /** Holds every answer against its schema: in tests. */
  checkAnswers: boolean
}

/** Hands a declared route to Express: gates in this order are site, database, session, role, body, handler. */
export function register(app: Express, one: Route, needs: RegisterNeeds): void {
  const { options, path } = one
  const usesSession = options.role !== 'none' || options.session === true
  const method = one.method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete'
  app[method](
    path,
    (req, res, next) => {
      if (path.startsWith('/api/')) {
        res.setHeader('Cache-Control', 'no-store')
        requireSameSite(req, needs.ownOrigin)
      }
      if (usesSession && !needs.databaseIsReady())
        throw new ProblemError(
          'database-away',
          'The database does not answer at the moment; what you typed is still in your browser.',
        )
      next()
    },
    ...(usesSession ? needs.session : []),
    (req, _res, next) => {
      requireRole(options.role, (req.user as SignedIn | undefined) ?? null)
      next()
    },
    ...(options.body ? bodyReaders(options.takes ?? JSON_TYPE, options.bodyLimit ?? '1mb') : []),
    handler(one, needs),
  )
}

function requireRole(needed: RouteRole, person: SignedIn | null): void {
  if (needed === 'none') return
  if (!person) throw new ProblemError('not-signed-in', 'Sign in to go on.')
  if (ROLES.indexOf(person.role) < ROLES.indexOf(needed))
    throw new ProblemError('role-too-low', `This takes the role ${needed}; yours is ${person.role}.`)
}

function bodyReaders(takes: readonly string[], limit: string): RequestHandler[] {
  return [
    (req, _res, next) => {
      const type = (req.get('content-type') ?? '').split(';')[0]!.trim().toLowerCase()
      if (!takes.includes(type))
        throw new ProblemError('media-type-refused', `Send it with Content-Type: ${takes.join(' or ')}.`)
      next()
    },
    express.json({ inflate: false, limit, type: [...takes], strict: true }),
  ]
}

function handler({ options, handle, method, path }: Route, needs: RegisterNeeds): RequestHandler {
  const firstStatus = Number(Object.keys(options.answer)[0])
  return async (req, res) => {
    const person = (req.user as SignedIn | undefined) ?? null
    const body = options.body && validated(options.body, req.body, '#')
    const query = validated(options.query ?? NOTHING, { ...req.query }, '#/query')
    const params = validated(options.params ?? z.looseObject({}), { ...req.params }, '#/path')
    const idempotencyKey = options.idempotent ? idempotencyKeyOf(req.get('idempotency-key')) : null
    const request = { id: String(req.id), address: req.ip ?? '', log: req.log, idempotencyKey }
    let headers: Readonly<Record<string, string>> = {}
    const work = async () => {
      const context = { body, query, params, person, request, express: { req, res } }
      const given = await handle(context as unknown as Parameters<typeof handle>[0])
      const answer = given instanceof Reply ? given : new Reply(firstStatus, given)
      headers = answer.headers
      if (needs.checkAnswers) checkAnswer(`${method} ${path}`, options.answer[answer.status], answer)
      return { status: answer.status, body: answer.body }
    }
    const answer =
      idempotencyKey !== null && person
        ? await needs.idempotency.once(person.id, idempotencyKey, requestHash(method, req.originalUrl, req.body), work)
        : await work()
    res.status(answer.status).set(headers)
    if (answer.body === undefined || answer.status === 204) res.end()
    else res.type('application/json').send(JSON.stringify(answer.body))
  }
}

function checkAnswer(operation: string, schema: z.ZodType | null | undefined, { status, body }: Reply<unknown>): void {
  if (schema === undefined) throw new Error(`${operation} answers ${status}, which it does not declare.`)
  if (schema === null) return
  const outcome = schema.safeParse(JSON.parse(JSON.stringify(body)))
  if (!outcome.success) throw new Error(`${operation} answers what its contract does not say: ${outcome.error.message}`)
}
