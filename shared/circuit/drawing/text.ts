import { splitName } from '../../formula/tex'
import type { Anchor, Box, DrawingText } from './drawing'

/** Size of designators and names, of their subscripts, and of values; drawing units. */
export const TEXT_SIZE = { name: 15, sub: 11, value: 13 } as const

/** A name as letter and subscript; an op-amp's designator and a rail such as V+ stay whole. */
export function nameParts(name: string): { text: string; sub: string } {
  if (/^U/.test(name) || /[+\-−]$/.test(name)) return { text: name.replace(/-$/, '−'), sub: '' }
  const rail = /^V([A-Za-z0-9]+)$/.exec(name)
  if (rail) return { text: 'V', sub: rail[1]! }
  const [text, sub] = splitName(name)
  return { text, sub }
}

/** About the width that a name takes in the text face, drawing units. */
export const nameWidth = ({ text, sub }: { text: string; sub: string }) => 9 * text.length + 6.2 * sub.length + 2

/** Room of a text on a baseline. */
export function roomOf(
  { x, y, anchor }: { x: number; y: number; anchor: Anchor },
  { width, height }: { width: number; height: number },
): Box {
  const left = anchor === 'start' ? x : anchor === 'end' ? x - width : x - width / 2
  return { left, right: left + width, top: y - height + 3, bottom: y + 4 }
}

export const textBox = (text: DrawingText): Box => roomOf(text, { width: nameWidth(text), height: TEXT_SIZE.name })
