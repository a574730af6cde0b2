import { BLOCK_FUNCTIONS } from '#shared/contracts/names'
import type { Shelf, ShelfQuery } from '#shared/contracts/blocks'
import type { RevisionLineRow } from './repository'

type Choice = 'function' | 'topology' | 'order'
const CHOICES: Choice[] = ['function', 'topology', 'order']

const keeps = (row: RevisionLineRow, query: ShelfQuery, choice: Choice) =>
  query[choice] === undefined || row[choice] === query[choice]

/** Rows that every choice leaves. */
export const narrow = (rows: RevisionLineRow[], query: ShelfQuery) =>
  rows.filter((row) => CHOICES.every((choice) => keeps(row, query, choice)))

/** For each choice, how many rows each of its values would leave under the other choices. */
export function narrowingOf(
  rows: RevisionLineRow[],
  query: ShelfQuery,
  statuses: RevisionLineRow[],
): Shelf['narrowing'] {
  const counts = (choice: Choice) => {
    const left = rows.filter((row) => CHOICES.every((other) => other === choice || keeps(row, query, other)))
    const tally = new Map<string, number>()
    for (const row of left) tally.set(String(row[choice]), (tally.get(String(row[choice])) ?? 0) + 1)
    return [...tally].map(([name, count]) => ({ name, count }))
  }
  const place = (name: string) => (BLOCK_FUNCTIONS as readonly string[]).indexOf(name)
  return {
    functions: counts('function').sort((a, b) => place(a.name) - place(b.name)),
    topologies: counts('topology').sort((a, b) => b.count - a.count || a.name.localeCompare(b.name)),
    orders: counts('order').sort((a, b) => Number(a.name) - Number(b.name)),
    statuses: ['approved', 'in review'].map((name) => ({
      name,
      count: new Set(statuses.filter((row) => row.status === name).map((row) => row.blockId)).size,
    })),
  }
}
