import { ProblemError } from '#shared/problems'
import type { Database } from '../database'
import type { PeopleRepository, SignedIn } from '../people'
import type { SignInAttempts } from './attempts'
import type { PasswordHasher } from './password-hash'
import { sessionRepository } from './session-repository'

interface Needs {
  queries: Database['queries']
  people: PeopleRepository
  hasher: PasswordHasher
  attempts: SignInAttempts
}

/** Who may come in. The answer is the same, and takes as long, whether or not the account exists. */
export function signInService({ queries, people, hasher, attempts }: Needs) {
  return {
    /** @throws {ProblemError} 'sign-in-failed' or 'too-many-attempts' */
    async verify(email: string, password: string, address: string): Promise<SignedIn> {
      const person = await people.byEmail(queries, email)
      const isKnown = person !== null && (await sessionRepository.knowsAddress(queries, person.id, address))
      await attempts.count(email, address, isKnown)
      const isRight = await hasher.verify(password, person?.passwordHash ?? null)
      if (!person || !isRight || person.disabledAt !== null)
        throw new ProblemError('sign-in-failed', 'E-mail and password do not belong together.')
      await attempts.forgive(email, address, isKnown)
      if (hasher.needsRehash(person.passwordHash))
        await people.setPasswordHash(queries, person.id, await hasher.hash(password))
      return { id: person.id, name: person.name, email: person.email, role: person.role }
    },
    /** Whoever the session belongs to, as they are now; null once disabled. */
    async person(id: number): Promise<SignedIn | null> {
      const row = await people.active(queries, id)
      return row && { id: row.id, name: row.name, email: row.email, role: row.role }
    },
  }
}
export type SignInService = ReturnType<typeof signInService>
