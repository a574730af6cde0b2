import type { GridPoint, SourceSpan } from '../part'

/** A word of a statement with its column from 1. */
export interface Word {
  text: string
  column: number
}

/** One line of a circuit text, comment removed. */
export interface Statement {
  words: Word[]
  span: SourceSpan
}

/** Largest coordinate. */
export const GRID_MAX = 200

/** Cuts a circuit text into statements; blank and comment lines give none. */
export function statementsOf(text: string): Statement[] {
  return text.split(/\r\n|\n|\r/).flatMap((line, k) => {
    const code = line.split('#')[0]!
    const words = [...code.matchAll(/\S+/g)].map((match) => ({ text: match[0], column: match.index + 1 }))
    if (words.length === 0) return []
    const last = words.at(-1)!
    return [{ words, span: { line: k + 1, column: words[0]!.column, endColumn: last.column + last.text.length } }]
  })
}

/** Reads `3,6`; null when it is no grid point. */
export function pointOf(word: Word | undefined): GridPoint | null {
  const match = word && /^(\d{1,3}),(\d{1,3})$/.exec(word.text)
  if (!match) return null
  const point = { x: Number(match[1]), y: Number(match[2]) }
  return point.x <= GRID_MAX && point.y <= GRID_MAX ? point : null
}

export const samePoint = (a: GridPoint, b: GridPoint) => a.x === b.x && a.y === b.y

/** True when p lies on the run from a to b, ends included; runs are horizontal or vertical. */
export const onRun = (p: GridPoint, a: GridPoint, b: GridPoint) =>
  (a.x === b.x && p.x === a.x && p.y >= Math.min(a.y, b.y) && p.y <= Math.max(a.y, b.y)) ||
  (a.y === b.y && p.y === a.y && p.x >= Math.min(a.x, b.x) && p.x <= Math.max(a.x, b.x))
