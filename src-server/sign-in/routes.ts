import type { Request, Response } from 'express'
import { Me, SignIn } from '#shared/contracts/people'
import { ProblemError } from '#shared/problems'
import { route } from '../http/route'
import type { SignedIn } from '../people'
import { TooManyAttempts } from './attempts'
import { cookieName, type SessionHandlers } from './session-handlers'

const meOf = ({ name, email, role }: SignedIn): Me => ({ name, email, role })

interface Needs {
  authenticate: SessionHandlers['authenticate']
  overHttps: boolean
}

export const signInRoutes = ({ authenticate, overHttps }: Needs) => [
  route(
    'POST /api/sign-in',
    { role: 'none', session: true, body: SignIn, bodyLimit: '16kb', answer: { 200: Me } },
    async ({ body, request, express: { req, res } }) => {
      req.body = body
      try {
        await run(authenticate, req, res)
      } catch (error) {
        if (error instanceof TooManyAttempts) res.setHeader('Retry-After', String(error.retryAfterSec))
        if (error instanceof ProblemError)
          request.log.warn({ address: request.address, outcome: error.code }, 'sign-in')
        throw error
      }
      if (!req.user) throw new ProblemError('sign-in-failed', 'E-mail and password do not belong together.')
      request.log.info({ person: req.user.id, address: request.address, outcome: 'signed in' }, 'sign-in')
      return meOf(req.user)
    },
  ),
  route(
    'POST /api/sign-out',
    { role: 'none', session: true, answer: { 204: null } },
    async ({ person, request, express: { req, res } }) => {
      await new Promise<void>((resolve, reject) =>
        req.session.destroy((error: unknown) => (error ? reject(error as Error) : resolve())),
      )
      res.clearCookie(cookieName(overHttps), { path: '/', httpOnly: true, sameSite: 'lax', secure: overHttps })
      res.setHeader('Clear-Site-Data', '"cache"')
      if (person) request.log.info({ person: person.id }, 'sign-out')
    },
  ),
  route('GET /api/me', { role: 'reader', answer: { 200: Me } }, ({ person }) => meOf(person)),
]

function run(handler: SessionHandlers['authenticate'], req: Request, res: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    void handler(req, res, (error?: unknown) => (error ? reject(error as Error) : resolve()))
  })
}
