import type { GridPoint, OpampPart, PassivePart } from '../part'
import type { Box, DrawingStandard, Shape } from './drawing'
import { STEP } from './drawing'

/** Half lengths of the bodies, drawing units. */
const RESISTOR = { half: 23, side: 8 }
const CAPACITOR = { gap: 4, plate: 14 }
const INDUCTOR = { half: 26, bump: 6.5 }

export const px = (p: GridPoint): [number, number] => [p.x * STEP, p.y * STEP]

/** Middle of a passive part, and whether it lies. */
export function placeOf(part: PassivePart) {
  const [a, b] = part.pins.map(px) as [[number, number], [number, number]]
  return { a, b, x: (a[0] + b[0]) / 2, y: (a[1] + b[1]) / 2, lies: a[1] === b[1] }
}

/** Room that a body takes. */
export function bodyBox(part: PassivePart): Box {
  const { x, y, lies } = placeOf(part)
  const [along, across] = {
    resistor: [RESISTOR.half, RESISTOR.side],
    capacitor: [8, CAPACITOR.plate],
    inductor: [INDUCTOR.half, 8],
  }[part.kind] as [number, number]
  const [w, h] = lies ? [along, across] : [across, along]
  return { left: x - w, right: x + w, top: y - h, bottom: y + h }
}

/** Leads and body of a resistor, capacitor or inductor (IEC 60617; the resistor of IEEE 315 is a zigzag). */
export function passiveShapes(part: PassivePart, standard: DrawingStandard): Shape[] {
  const { a, b, x, y, lies } = placeOf(part)
  const at = (along: number, across: number): [number, number] =>
    lies ? [x + along, y + across] : [x + across, y + along]
  const forward = (lies ? b[0] > a[0] : b[1] > a[1]) ? 1 : -1
  const half = { resistor: RESISTOR.half, capacitor: CAPACITOR.gap, inductor: INDUCTOR.half }[part.kind]
  const leads: Shape[] = [
    { form: 'polyline', style: 'wire', points: [a, at(-forward * half, 0)] },
    { form: 'polyline', style: 'wire', points: [at(forward * half, 0), b] },
  ]
  const outline = (points: [number, number][], closed = false): Shape => ({
    form: 'polyline',
    style: 'body',
    points,
    closed,
    ref: part.ref,
  })
  if (part.kind === 'capacitor')
    return [
      ...leads,
      ...[-1, 1].map((side) =>
        outline([at(side * CAPACITOR.gap, -CAPACITOR.plate), at(side * CAPACITOR.gap, CAPACITOR.plate)]),
      ),
    ]
  if (part.kind === 'inductor') {
    const arcs = [-3, -1, 1, 3].map((k) => {
      const [to] = [at(INDUCTOR.bump * (k + 1), 0)]
      return `A ${INDUCTOR.bump} ${INDUCTOR.bump} 0 0 ${lies ? 1 : 0} ${to![0]} ${to![1]}`
    })
    const [startX, startY] = at(-INDUCTOR.half, 0)
    return [...leads, { form: 'path', style: 'body', d: `M ${startX} ${startY} ${arcs.join(' ')}`, ref: part.ref }]
  }
  if (standard === 'ieee') {
    const teeth = [-20, -12, -4, 4, 12, 20].map((along, k) => at(along, k % 2 ? 7 : -7))
    return [...leads, outline([at(-RESISTOR.half, 0), ...teeth, at(RESISTOR.half, 0)])]
  }
  const { half: long, side } = RESISTOR
  return [...leads, outline([at(-long, -side), at(long, -side), at(long, side), at(-long, side)], true)]
}

/** Corners of an op-amp's triangle, and the direction it points in. */
export function opampTriangle(part: OpampPart) {
  const direction = part.out.x > part.minus.x ? 1 : -1
  const [left, minusY] = px(part.minus)
  const [, plusY] = px(part.plus)
  const half = Math.abs(plusY - minusY) / 2 + 0.62 * STEP
  const middle = (minusY + plusY) / 2
  const depth = Math.min(Math.abs(part.out.x - part.minus.x) * STEP, 1.75 * half)
  return { direction, left, middle, half, tip: left + direction * depth, minusY, plusY }
}

export function opampShapes(part: OpampPart): Shape[] {
  const { left, middle, half, tip } = opampTriangle(part)
  const shapes: Shape[] = [
    {
      form: 'polyline',
      style: 'body',
      closed: true,
      points: [
        [left, middle - half],
        [tip, middle],
        [left, middle + half],
      ],
      ref: part.ref,
    },
    { form: 'polyline', style: 'wire', points: [[tip, middle], px(part.out)] },
  ]
  for (const pin of part.supply ?? []) {
    const [x, y] = px(pin)
    const inside = Math.abs(x - left) / Math.abs(tip - left)
    const edge = middle + Math.sign(y - middle) * half * (1 - inside)
    shapes.push({
      form: 'polyline',
      style: 'wire',
      points: [
        [x, y],
        [x, edge],
      ],
    })
  }
  return shapes
}

/** Earth symbol below its point. */
export function groundShapes(at: GridPoint): Shape[] {
  const [x, y] = px(at)
  const bar = (down: number, half: number): Shape => ({
    form: 'polyline',
    style: 'wire',
    points: [
      [x - half, y + down],
      [x + half, y + down],
    ],
  })
  return [
    {
      form: 'polyline',
      style: 'wire',
      points: [
        [x, y],
        [x, y + 10],
      ],
    },
    bar(10, 11),
    bar(15, 7),
    bar(20, 3),
  ]
}

/** A reference: an open triangle pointing down. */
export function referenceShapes(at: GridPoint): Shape[] {
  const [x, y] = px(at)
  return [
    {
      form: 'polyline',
      style: 'wire',
      points: [
        [x, y],
        [x, y + 8],
      ],
    },
    {
      form: 'polyline',
      style: 'wire',
      closed: true,
      points: [
        [x - 8, y + 8],
        [x + 8, y + 8],
        [x, y + 18],
      ],
    },
  ]
}

/** A supply: a bar above its point, or below it. */
export function supplyShapes(at: GridPoint, direction: 1 | -1): Shape[] {
  const [x, y] = px(at)
  const end = y + direction * 10
  const line = (points: [number, number][]): Shape => ({ form: 'polyline', style: 'wire', points })
  return [
    line([
      [x, y],
      [x, end],
    ]),
    line([
      [x - 9, end],
      [x + 9, end],
    ]),
  ]
}
