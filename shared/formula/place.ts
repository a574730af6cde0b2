/** Line and column, both from 1, of an offset (from 1) in a text of one or several lines. */
export function placeAt(text: string, offset: number): { line: number; column: number } {
  const lines = text.slice(0, Math.max(0, offset - 1)).split(/\r\n|\r|\n/)
  return { line: lines.length, column: lines.at(-1)!.length + 1 }
}

/** A text as it may stand in a sentence: short, on one line, without control characters and marks of direction. */
export function quoted(text: string): string {
  const short = text.length > 60 ? `${text.slice(0, 60)}…` : text
  return `“${short.replace(/\s+/g, ' ').replace(/[\p{C}\p{Zl}\p{Zp}]/gu, '?')}”`
}

/** One character as it may stand in a sentence; an invisible one by its code point. */
export function quotedCharacter(character: string): string {
  if (!/[\p{C}\p{Z}\p{M}]/u.test(character)) return `“${character}”`
  return `The character U+${character.codePointAt(0)!.toString(16).toUpperCase().padStart(4, '0')}`
}
