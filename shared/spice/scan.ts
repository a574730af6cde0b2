/** A word of a card, with its place in the deck, from 1. */
export interface Word {
  text: string
  line: number
  column: number
}

/** A card with its continuation lines: one word or more. */
export type Card = [Word, ...Word[]]

/** The lines of a deck as cards. */
export interface Scanned {
  /** The deck's first line when that is no comment; it may be a title. */
  first: Card | null
  cards: Card[]
  /** A continuation line with nothing before it to continue. */
  stray: Word | null
  /** The first word beyond the most that a deck has; nothing from there on was read. */
  beyond: Word | null
}

/** Words of a deck, comments left out. */
export const DECK_WORDS_MAX = 20_000

/** Commas and brackets part words like spaces; an equals sign is a word of its own. */
const WORD = /[^\s,()=;]+|=|;/g

/**
 * Parts a deck into cards: lines joined by a leading +, comments left out (a line that starts with *, the rest of a line
 * from ; or from a $ that starts a word), everything after `.end` left out. Time grows linearly with length.
 */
export function scanDeck(text: string): Scanned {
  const scanned: Scanned = { first: null, cards: [], stray: null, beyond: null }
  let open: Card | null = null
  let count = 0
  const lines = text.split(/\r\n|\r|\n/)
  for (let k = 0; k < lines.length; k++) {
    if (lines[k] === '') continue
    const words = wordsOf(lines[k]!, k + 1, DECK_WORDS_MAX - count + 1)
    count += words.length
    if (count > DECK_WORDS_MAX) {
      scanned.beyond = words.at(-1)!
      break
    }
    const [head, ...more] = words
    if (!head) continue
    if (head.text.startsWith('+')) {
      const rest = head.text.length > 1 ? [{ ...head, text: head.text.slice(1), column: head.column + 1 }] : []
      if (open) for (const word of [...rest, ...more]) open.push(word)
      else scanned.stray ??= head
      continue
    }
    const card: Card = [head, ...more]
    if (head.text.toLowerCase() === '.end') break
    open = card
    if (k === 0) scanned.first = card
    else scanned.cards.push(card)
  }
  return scanned
}

function wordsOf(line: string, number: number, most: number): Word[] {
  const words: Word[] = []
  WORD.lastIndex = 0
  for (let match = WORD.exec(line); match; match = WORD.exec(line)) {
    const [text] = match
    if (words.length === 0 && text.startsWith('*')) break
    if (text === ';' || text.startsWith('$') || words.length === most) break
    words.push({ text, line: number, column: match.index + 1 })
  }
  return words
}
