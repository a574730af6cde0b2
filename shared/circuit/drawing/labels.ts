import type { GridPoint, LabelSide, OpampPart, PassivePart } from '../part'
import type { Anchor, Box, DrawingText, ValueSlot } from './drawing'
import { sharedArea, STEP } from './drawing'
import { bodyBox, opampTriangle, placeOf } from './symbols'
import { nameParts, nameWidth, roomOf, textBox, TEXT_SIZE } from './text'

/** Room of the widest usual value, 1.234 kΩ, and of an op-amp's name; drawing units. */
const VALUE = { width: 66, height: 15 }
const MODEL = { width: 80, height: 15 }

interface Placed {
  x: number
  y: number
  anchor: Anchor
}

interface Candidate {
  designator: Placed
  value: Placed
}

const crowding = (boxes: Box[], taken: readonly Box[]) =>
  taken.reduce((sum, other) => sum + boxes.reduce((part, box) => part + sharedArea(box, other), 0), 0)

/** The candidate that covers least of what is drawn, the earlier one where they are equal. */
function leastCrowded<T extends object>(
  candidates: readonly T[],
  taken: readonly Box[],
  boxesOf: (one: T) => Box[],
): T {
  let best = candidates[0]!
  let least = Infinity
  for (const one of candidates) {
    const crowded = crowding(boxesOf(one), taken)
    if (crowded < least) [best, least] = [one, crowded]
    if (least === 0) break
  }
  return best
}

/**
 * Places designator and value of each passive part where they touch nothing: above and below a lying part, side by side
 * above or below it, right or left of a standing one. Parts whose side the editor chose come first.
 * @param taken room already used by wires, bodies and texts; what is placed is added to it
 */
export function placeLabels(parts: PassivePart[], taken: Box[]): { texts: DrawingText[]; values: ValueSlot[] } {
  const placed = new Map<string, Candidate>()
  for (const part of [...parts.filter((one) => one.label), ...parts.filter((one) => !one.label)]) {
    const designator = { width: nameWidth(nameParts(part.ref)), height: TEXT_SIZE.name }
    const boxesOf = (one: Candidate) => [roomOf(one.designator, designator), roomOf(one.value, VALUE)]
    const best = leastCrowded(part.label ? [beside(part, part.label)] : candidatesFor(part), taken, boxesOf)
    taken.push(...boxesOf(best))
    placed.set(part.ref, best)
  }
  return {
    texts: parts.map((part) => ({
      role: 'designator',
      ...placed.get(part.ref)!.designator,
      ...nameParts(part.ref),
      ref: part.ref,
    })),
    values: parts.map((part) => ({ ref: part.ref, ...placed.get(part.ref)!.value, width: VALUE.width })),
  }
}

function candidatesFor(part: PassivePart): Candidate[] {
  const { x, lies } = placeOf(part)
  const box = bodyBox(part)
  if (!lies) return [beside(part, 'right'), beside(part, 'left')]
  const above: Placed = { x, y: box.top - 7, anchor: 'middle' }
  const below: Placed = { x, y: box.bottom + 17, anchor: 'middle' }
  return [
    { designator: above, value: below },
    beside(part, 'above'),
    beside(part, 'below'),
    { designator: below, value: above },
  ]
}

/** Designator and value on one side: in one line above or below a lying part, else one over the other. */
function beside(part: PassivePart, side: LabelSide): Candidate {
  const { x, y, lies } = placeOf(part)
  const box = bodyBox(part)
  if (side === 'above' || side === 'below') {
    const baseline = side === 'above' ? box.top - 7 : box.bottom + 17
    if (lies)
      return { designator: { x: x - 4, y: baseline, anchor: 'end' }, value: { x: x + 8, y: baseline, anchor: 'start' } }
    const [upper, lower] = side === 'above' ? [baseline - 16, baseline] : [baseline, baseline + 16]
    return { designator: { x, y: upper, anchor: 'middle' }, value: { x, y: lower, anchor: 'middle' } }
  }
  const edge = side === 'right' ? box.right + 8 : box.left - 8
  const anchor: Anchor = side === 'right' ? 'start' : 'end'
  return { designator: { x: edge, y: y - 4, anchor }, value: { x: edge, y: y + 14, anchor } }
}

/** Places the names of ports and nodes around their points. */
export function placePoints(
  points: readonly { at: GridPoint; name: string }[],
  role: 'port' | 'node',
  taken: Box[],
): DrawingText[] {
  return points.map(({ at, name }) => {
    const [x, y] = [at.x * STEP, at.y * STEP]
    const [up, down] = role === 'port' ? [14, 23] : [7, 17]
    const places: Placed[] = [
      ...(role === 'port'
        ? ([
            { x, y: y - up, anchor: 'middle' },
            { x, y: y + down, anchor: 'middle' },
          ] as const)
        : []),
      { x: x + 6, y: y - up, anchor: 'start' },
      { x: x - 6, y: y - up, anchor: 'end' },
      { x: x + 6, y: y + down, anchor: 'start' },
      { x: x - 6, y: y + down, anchor: 'end' },
    ]
    const parts = role === 'port' ? { text: name, sub: '' } : nameParts(name)
    const texts = places.map((place): DrawingText => ({ role, ...place, ...parts }))
    const best = leastCrowded(texts, taken, (text) => [textBox(text)])
    taken.push(textBox(best))
    return best
  })
}

/** Places the names of the chosen op-amps beside the slopes of their triangles. */
export function placeModels(opamps: readonly OpampPart[], taken: Box[]): ValueSlot[] {
  return opamps.map((part) => {
    const { direction, left, tip, middle, half } = opampTriangle(part)
    const anchor: Anchor = direction > 0 ? 'start' : 'end'
    const x = left + 0.62 * (tip - left)
    const places: Placed[] = [
      { x, y: middle + half + 2, anchor },
      { x: left + 0.82 * (tip - left), y: middle + 0.5 * half + 12, anchor },
      { x, y: middle - half + 8, anchor },
      { x: left + 0.82 * (tip - left), y: middle - 0.5 * half, anchor },
      { x: left, y: middle + half + 17, anchor },
      { x: left, y: middle - half - 6, anchor },
    ]
    const best = leastCrowded(places, taken, (one) => [roomOf(one, MODEL)])
    taken.push(roomOf(best, MODEL))
    return { ref: part.ref, ...best, width: MODEL.width }
  })
}
