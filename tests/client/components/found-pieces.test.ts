import { describe, expect, it } from 'vitest'
import { foundPieces } from '../../../src/components/shelf/found-pieces'

const marked = (text: string, words: string[]) =>
  foundPieces(text, words)
    .map(({ text, isFound }) => (isFound ? `[${text}]` : text))
    .join('')

describe('marking the words found', () => {
  it.each([
    ['Inverting low-pass', ['low'], 'Inverting [low]-pass'],
    ['Sallen–Key low-pass', ['sallen', 'key'], '[Sallen]–[Key] low-pass'],
    ['Filtre à résistance', ['res'], 'Filtre à [rés]istance'],
    ['LP2-MFB', ['mfb'], 'LP2-[MFB]'],
    ['Non-inverting', ['verting'], 'Non-inverting'],
    ['Low-pass', [], 'Low-pass'],
  ])('in %s for %j', (text, words, expected) => expect(marked(text, words)).toBe(expected))

  it.each(['a.b(c', '<b>x</b>', '$& $1', 'ﬁlter İstanbul ǅ', '🄰 lp'])('gives back every sign of %s', (text) =>
    expect(
      foundPieces(text, ['lp', 'b', '(', '$'])
        .map((piece) => piece.text)
        .join(''),
    ).toBe(text),
  )
})
