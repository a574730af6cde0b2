import { splitName } from '../../formula/tex'
import type { LabelSide, PassivePart } from '../part'
import type { Anchor, Box, DrawingText, ValueSlot } from './drawing'
import { overlaps } from './drawing'
import { bodyBox, placeOf } from './symbols'

/** Room of a designator and of the widest usual value, drawing units. */
const DESIGNATOR = { width: 20, height: 15 }
const VALUE = { width: 66, height: 15 }

interface Placed {
  x: number
  y: number
  anchor: Anchor
}

interface Candidate {
  designator: Placed
  value: Placed
}

/** Baseline text at a place takes this room. */
function boxOf({ x, y, anchor }: Placed, { width, height }: typeof VALUE): Box {
  const left = anchor === 'start' ? x : anchor === 'end' ? x - width : x - width / 2
  return { left, right: left + width, top: y - height + 3, bottom: y + 4 }
}

/**
 * Places designator and value of each passive part where they touch nothing: above and below a lying part, side by side
 * above or below it, right or left of a standing one.
 * @param taken room already used by wires, bodies and texts; what is placed is added to it
 */
export function placeLabels(parts: PassivePart[], taken: Box[]): { texts: DrawingText[]; values: ValueSlot[] } {
  const texts: DrawingText[] = []
  const values: ValueSlot[] = []
  for (const part of parts) {
    const candidates = part.label ? [sideCandidate(part, part.label)] : candidatesFor(part)
    const cost = (one: Candidate) => {
      const boxes = [boxOf(one.designator, DESIGNATOR), boxOf(one.value, VALUE)]
      return taken.reduce((sum, other) => sum + boxes.filter((box) => overlaps(box, other)).length, 0)
    }
    const best = candidates.reduce((least, one) => (cost(one) < cost(least) ? one : least))
    taken.push(boxOf(best.designator, DESIGNATOR), boxOf(best.value, VALUE))
    const [text, sub] = splitName(part.ref)
    texts.push({ role: 'designator', ...best.designator, text, sub, ref: part.ref })
    values.push({ ref: part.ref, ...best.value })
  }
  return { texts, values }
}

function candidatesFor(part: PassivePart): Candidate[] {
  const { x, lies } = placeOf(part)
  const box = bodyBox(part)
  if (!lies) return [sideCandidate(part, 'right'), sideCandidate(part, 'left')]
  const split: Candidate = {
    designator: { x, y: box.top - 7, anchor: 'middle' },
    value: { x, y: box.bottom + 17, anchor: 'middle' },
  }
  const upsideDown: Candidate = {
    designator: { x, y: box.bottom + 17, anchor: 'middle' },
    value: { x, y: box.top - 7, anchor: 'middle' },
  }
  return [split, sideCandidate(part, 'above'), sideCandidate(part, 'below'), upsideDown]
}

function sideCandidate(part: PassivePart, side: LabelSide): Candidate {
  const { x, y, lies } = placeOf(part)
  const box = bodyBox(part)
  if (side === 'above' || side === 'below') {
    const baseline = side === 'above' ? box.top - 7 : box.bottom + 17
    if (!lies)
      return {
        designator: { x, y: baseline - (side === 'above' ? 16 : 0), anchor: 'middle' },
        value: { x, y: baseline + (side === 'above' ? 0 : 16), anchor: 'middle' },
      }
    return { designator: { x: x - 4, y: baseline, anchor: 'end' }, value: { x: x + 8, y: baseline, anchor: 'start' } }
  }
  const edge = side === 'right' ? box.right + 8 : box.left - 8
  const anchor: Anchor = side === 'right' ? 'start' : 'end'
  return { designator: { x: edge, y: y - 4, anchor }, value: { x: edge, y: y + 14, anchor } }
}
