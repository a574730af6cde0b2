import highlightWords from 'highlight-words'

export interface Piece {
  text: string
  isFound: boolean
}

/**
 * A text in pieces, those marked in which a searched word begins. Case, accents and the kind of hyphen do not count.
 *
 * @param words as the server looked them up: folded, perhaps unfinished
 */
export function foundPieces(text: string, words: readonly string[]): Piece[] {
  if (words.length === 0) return [{ text, isFound: false }]
  let at = 0
  const pieces = highlightWords({ text: foldInPlace(text), query: words.join(' ') }).map((chunk) => {
    const piece = { text: text.slice(at, at + chunk.text.length), isFound: chunk.match && startsWord(text, at) }
    at += chunk.text.length
    return piece
  })
  return pieces.filter((piece) => piece.text !== '')
}

/** Lower case without accents, as long as the text itself. */
const foldInPlace = (text: string): string =>
  [...text]
    .map((sign) => {
      const plain = sign
        .normalize('NFKD')
        .replace(/\p{M}+/gu, '')
        .replace(/[‐-―]/g, '-')
        .toLowerCase()
      return plain.length === sign.length ? plain : sign
    })
    .join('')

const startsWord = (text: string, at: number): boolean => at === 0 || !/[\p{L}\p{N}]/u.test(text[at - 1]!)
