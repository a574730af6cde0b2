import { and, eq, isNull } from 'drizzle-orm'
import type { Role } from '#shared/contracts/names'
import type { Queries } from '../database'
import { people, type PersonRow } from '../database/tables/people'

/** The SQL about people. E-mail addresses are kept and compared in lower case. */
export const peopleRepository = {
  async byEmail(queries: Queries, email: string): Promise<PersonRow | null> {
    const [row] = await queries.select().from(people).where(eq(people.email, email.toLowerCase()))
    return row ?? null
  },
  /** A person who may act: not disabled. */
  async active(queries: Queries, id: number): Promise<PersonRow | null> {
    const [row] = await queries
      .select()
      .from(people)
      .where(and(eq(people.id, id), isNull(people.disabledAt)))
    return row ?? null
  },
  /** Everybody of a role, in the order they came. */
  ofRole(queries: Queries, role: Role): Promise<PersonRow[]> {
    return queries.select().from(people).where(eq(people.role, role)).orderBy(people.id)
  },
  async insert(queries: Queries, person: typeof people.$inferInsert): Promise<void> {
    await queries.insert(people).values({ ...person, email: person.email.toLowerCase() })
  },
  async setPasswordHash(queries: Queries, id: number, passwordHash: string): Promise<void> {
    await queries.update(people).set({ passwordHash }).where(eq(people.id, id))
  },
}
export type PeopleRepository = typeof peopleRepository
