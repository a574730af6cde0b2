import type { ShelfRow } from '#shared/contracts/blocks'
import { foundPieces } from './found-pieces'

export interface FoundReason {
  /** Where the words were found, as the beginning of a sentence. */
  place: string
  text: string
}

const holds = (text: string, word: string): boolean => foundPieces(text, [word]).some(({ isFound }) => isFound)

/** Why a row matched, where the row itself does not show it: the names it also goes by, its notes, its parts. */
export function foundReason(row: ShelfRow): FoundReason | null {
  const { found } = row
  if (!found) return null
  const shown = [row.code, row.title, row.summary, row.topology]
  const unseen = found.words.filter((word) => !shown.some((text) => holds(text, word)))
  if (unseen.length === 0) return null
  const names = [...new Set([...row.aliases, ...row.tags])].filter((name) => unseen.some((word) => holds(name, word)))
  if (names.length > 0) return { place: 'Also called', text: names.join(', ') }
  if (found.in === 'names and tags' || !found.excerpt) return { place: 'Found by its function,', text: row.function }
  return { place: `Found in ${found.in}:`, text: found.excerpt }
}
