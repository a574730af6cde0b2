import type { Request, RequestHandler } from 'express'
import session from 'express-session'
import { Passport } from 'passport'
import { Strategy } from 'passport-local'
import type { SignedIn } from '../people'
import type { SignInService } from './service'

declare global {
  // eslint-disable-next-line @typescript-eslint/no-namespace
  namespace Express {
    // eslint-disable-next-line @typescript-eslint/no-empty-object-type
    interface User extends SignedIn {}
  }
}

interface Needs {
  signIn: SignInService
  store: session.Store
  secret: string
  overHttps: boolean
}

/** Name of the session cookie; over https its prefix lets browsers take it from this host alone. */
export const cookieName = (overHttps: boolean): string => (overHttps ? '__Host-poleshelf' : 'poleshelf')

/** Opens the session of a request and finds its person; `authenticate` checks e-mail and password. */
export function sessionHandlers({ signIn, store, secret, overHttps }: Needs) {
  const passport = new Passport()
  passport.use(
    new Strategy({ usernameField: 'email', passReqToCallback: true, session: true }, (req, email, password, done) => {
      signIn.verify(email, password, req.ip ?? '').then((person) => done(null, person), done)
    }),
  )
  // Runs in the session that sign-in has just renewed, before it is stored.
  passport.serializeUser<number, Request>((req, person, done) => {
    req.session.signedInFrom = { address: req.ip ?? '', agent: req.get('user-agent') ?? '' }
    done(null, person.id)
  })
  passport.deserializeUser<number>((id, done) => {
    signIn.person(id).then((person) => done(null, person ?? false), done)
  })
  const handlers = [
    session({
      name: cookieName(overHttps),
      secret,
      store,
      resave: false,
      saveUninitialized: false,
      cookie: { httpOnly: true, sameSite: 'lax', path: '/', secure: overHttps },
    }),
    passport.initialize(),
    passport.session(),
  ] as RequestHandler[]
  return { handlers, authenticate: passport.authenticate('local') as RequestHandler }
}
export type SessionHandlers = ReturnType<typeof sessionHandlers>
