import { randomInt, randomUUID } from 'node:crypto'
import { link, mkdir, readFile, unlink, writeFile } from 'node:fs/promises'
import { dirname } from 'node:path'
import { z } from 'zod'
import { Role } from '#shared/contracts/names'
import type { Database } from '../database'
import { isDuplicate } from '../database'
import type { PeopleRepository } from './repository'

/** Invented people: one a role. */
export const DEMONSTRATION_PEOPLE = [
  { role: 'reader', email: 'tomke.vries@poleshelf.example', name: 'Tomke Vries' },
  { role: 'editor', email: 'ines.marlow@poleshelf.example', name: 'Ines Marlow' },
  { role: 'lead', email: 'rade.oyelaran@poleshelf.example', name: 'Rade Oyelaran' },
] as const

const Account = z.strictObject({ role: Role, email: z.string(), password: z.string(), name: z.string() })
export type Account = z.output<typeof Account>

interface Needs {
  database: Database
  people: PeopleRepository
  hash: (password: string) => Promise<string>
  /** Where the passwords made at the first start are kept, readable by the owner alone. */
  file: string
  now: () => Date
}

/** Makes the demonstration accounts that are missing, with passwords of this installation's own. */
export async function makeDemonstrationPeople({ database, people, hash, file, now }: Needs): Promise<Account[]> {
  const { accounts, isNew } = await accountsIn(file)
  for (const { email, name, role, password } of accounts) {
    const there = await people.byEmail(database.queries, email)
    if (there && !isNew) continue
    const passwordHash = await hash(password)
    if (there) await people.setPasswordHash(database.queries, there.id, passwordHash)
    else
      await people
        .insert(database.queries, { email, name, role, passwordHash, createdAt: now() })
        .catch((error: unknown) => {
          if (!isDuplicate(error)) throw error
        })
  }
  return accounts
}

/** The accounts in the file; made, whole or not at all, when there is none. */
async function accountsIn(file: string): Promise<{ accounts: Account[]; isNew: boolean }> {
  const read = async () => z.array(Account).parse(JSON.parse(await readFile(file, 'utf8')))
  try {
    return { accounts: await read(), isNew: false }
  } catch (error) {
    if ((error as { code?: string }).code !== 'ENOENT') throw error
  }
  const accounts = DEMONSTRATION_PEOPLE.map((person) => ({ ...person, password: readablePassword() }))
  const draft = `${file}.${randomUUID()}`
  await mkdir(dirname(file), { recursive: true, mode: 0o700 })
  await writeFile(draft, `${JSON.stringify(accounts, null, 2)}\n`, { mode: 0o600 })
  try {
    await link(draft, file)
    return { accounts, isNew: true }
  } catch (error) {
    if ((error as { code?: string }).code !== 'EEXIST') throw error
    return { accounts: await read(), isNew: false }
  } finally {
    await unlink(draft)
  }
}

const CONSONANTS = 'bdfghklmnprstvz'
const VOWELS = 'aeiou'

/** Four groups of three syllables: 12 · log2(75) = 74 bits, easy to read out and to type. */
export function readablePassword(): string {
  const syllable = () => CONSONANTS[randomInt(CONSONANTS.length)]! + VOWELS[randomInt(VOWELS.length)]!
  const group = () => syllable() + syllable() + syllable()
  return [group(), group(), group(), group()].join('-')
}
