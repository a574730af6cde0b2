import { sql, type SQL } from 'drizzle-orm'
import type { Queries } from '../database'
import { revisions } from '../database/tables/blocks'

/** Words that the full-text index leaves out (InnoDB's own list). */
const STOPWORDS = new Set(
  'a about an are as at be by com de en for from how i in is it la of on or that the this to was what when where who will with und the www'.split(
    ' ',
  ),
)

const COLUMNS = [
  [revisions.searchTitle, 8],
  [revisions.searchWords, 6],
  [revisions.searchParts, 3],
  [revisions.searchNotes, 1],
] as const

/**
 * Revisions among the given ones that hold every word, the best first. Each word is data: letters and digits with a
 * plus before and a star behind; short words, which an index may leave out, are looked up in the names as well.
 */
export async function searchRevisions(queries: Queries, ids: number[], tokens: string[]): Promise<number[]> {
  const told = tokens.filter((token) => !STOPWORDS.has(token))
  const words = told.length ? told : tokens
  if (words.length === 0 || ids.length === 0) return []
  const score = sql.join(
    COLUMNS.map(
      ([column, weight]) => sql`${weight} * (match(${column}) against (${against(words, '')} in boolean mode))`,
    ),
    sql` + `,
  )
  const rows = await queries
    .select({ id: revisions.id, score: sql<number>`${score}`.as('score') })
    .from(revisions)
    .where(sql`${revisions.id} in ${ids} and ${sql.join(words.map(holds), sql` and `)}`)
    .orderBy(sql`score desc`, revisions.id)
  return rows.map((row) => row.id)
}

const against = (words: string[], sign: string) => words.map((word) => `${sign}${word}*`).join(' ')

/** A word anywhere in the indexed texts, or at the beginning of a word of the names. */
function holds(word: string): SQL {
  const anywhere = COLUMNS.map(([column]) => sql`match(${column}) against (${against([word], '+')} in boolean mode)`)
  const names = [revisions.searchTitle, revisions.searchWords, revisions.searchParts].map(
    (column) => sql`concat(' ', ${column}) like ${`% ${word}%`}`,
  )
  return sql`(${sql.join([...anywhere, ...names], sql` or `)})`
}
