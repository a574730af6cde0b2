import { Me, type SignIn } from '#shared/contracts/people'
import { call } from './api'

/** Who is signed in; fails with 'not-signed-in' rather than asking. */
export const fetchMe = (): Promise<Me> => call('/api/me', { answer: Me, asksToSignIn: false, retries: 0 })

/** Signs in; the session comes as a cookie. @throws {ApiProblem} 'sign-in-failed', 'too-many-attempts' */
export const signIn = (credentials: SignIn): Promise<Me> =>
  call('/api/sign-in', { method: 'POST', body: credentials, answer: Me, asksToSignIn: false })

/** Ends the session. */
export const signOut = (): Promise<void> =>
  call('/api/sign-out', { method: 'POST', body: {}, answer: null, asksToSignIn: false })
