import { nearName } from '#shared/formula/near-name'
import type { ShelfRow } from '#shared/contracts/blocks'
import { fold, searchTokens } from './words'

/** The texts of one block that are searched, with what each is called when it is why the block matched. */
export interface SearchTexts {
  title: string
  words: string
  parts: string
  notes: string
}

const PLACES = [
  ['title', 'title'],
  ['words', 'names and tags'],
  ['parts', 'parts'],
  ['notes', 'notes'],
] as const

const EXCERPT_BEFORE = 60
const EXCERPT_AFTER = 120

/** Why a block matched: the words found, and the first place that holds one, with the text around it. */
export function explainMatch(texts: SearchTexts, tokens: string[]): NonNullable<ShelfRow['found']> {
  for (const [key, name] of PLACES) {
    const folded = fold(texts[key])
    const words = tokens.filter((token) => startsAWord(folded, token) >= 0)
    if (words.length === 0) continue
    const at = startsAWord(folded, words[0]!)
    const from = Math.max(0, at - EXCERPT_BEFORE)
    const cut = texts[key]
      .slice(from, at + EXCERPT_AFTER)
      .replace(/\s+/g, ' ')
      .trim()
    return {
      words: tokens,
      in: name,
      excerpt: `${from > 0 ? '… ' : ''}${cut}${at + EXCERPT_AFTER < texts[key].length ? ' …' : ''}`,
    }
  }
  return { words: tokens, in: 'names and tags', excerpt: '' }
}

/**
 * How directly a block was named: 0 by its code, 1 by the beginning of its title, 2 by an alias, 3 by words somewhere.
 * The index alone would put a page that mentions another one above it.
 */
export function directness(block: { code: string; title: string; aliases: string[] }, tokens: string[]): number {
  const phrase = tokens.join(' ')
  const plain = (text: string) => searchTokens(text).join(' ')
  if (plain(block.code) === phrase) return 0
  if (plain(block.title).startsWith(phrase)) return 1
  return block.aliases.some((alias) => plain(alias) === phrase) ? 2 : 3
}

/** Place where a word begins with the token, or −1. */
function startsAWord(folded: string, token: string): number {
  for (let at = folded.indexOf(token); at >= 0; at = folded.indexOf(token, at + 1))
    if (at === 0 || !/[\p{L}\p{N}]/u.test(folded[at - 1]!)) return at
  return -1
}

/** What was typed with each unknown word replaced by the nearest one that the shelf knows; null when none is near. */
export function suggestion(tokens: string[], vocabulary: ReadonlySet<string>): string | null {
  const known = [...vocabulary]
  let changed = false
  const words = tokens.map((token) => {
    if (known.some((word) => word.startsWith(token))) return token
    const near = nearName(token, known)
    if (near) changed = true
    return near ?? token
  })
  return changed ? words.join(' ') : null
}
