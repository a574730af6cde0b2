import type { Circuit, GridPoint, OpampPart, PassivePart } from '../part'
import { Arms } from './arms'
import type { Box, Drawing, DrawingStandard, DrawingText, PartArea, Shape } from './drawing'
import { STEP } from './drawing'
import { placeLabels, placeModels, placePoints } from './labels'
import {
  bodyBox,
  groundShapes,
  opampShapes,
  opampTriangle,
  passiveShapes,
  px,
  referenceShapes,
  supplyShapes,
} from './symbols'
import { nameParts, textBox } from './text'

const MARGIN = 8
const PORT_RADIUS = 4.6
const DOT_RADIUS = 3.6

/**
 * Draws a circuit: shapes, texts and the places of the live values. The same drawing serves the page, the sheet and the
 * editor; nothing in it is markup. A grid point x, y stands at x·STEP, y·STEP.
 * Source of the symbols: IEC 60617; IEEE 315 for the zigzag resistor.
 */
export function drawCircuit(circuit: Circuit, options: { standard?: DrawingStandard } = {}): Drawing {
  const standard = options.standard ?? 'iec'
  const passive = circuit.parts.filter((part): part is PassivePart => part.kind !== 'opamp')
  const opamps = circuit.parts.filter((part): part is OpampPart => part.kind === 'opamp')
  const arms = new Arms(circuit)
  const ports = circuit.ports.flatMap((port) =>
    port.minus
      ? [
          { at: port.plus, name: `${port.name}+` },
          { at: port.minus, name: `${port.name}−` },
        ]
      : [{ at: port.plus, name: port.name }],
  )
  const circle = (at: GridPoint, style: 'dot' | 'port', radius: number): Shape => {
    const [x, y] = px(at)
    return { form: 'circle', style, x, y, radius }
  }
  const lines: Shape[] = [
    ...circuit.wires.map((wire): Shape => ({ form: 'polyline', style: 'wire', points: wire.points.map(px) })),
    ...passive.flatMap((part) => passiveShapes(part, standard)),
    ...opamps.flatMap(opampShapes),
    ...circuit.grounds.flatMap((one) => groundShapes(one.at)),
    ...circuit.references.flatMap((one) => referenceShapes(one.at)),
    ...circuit.supplies.flatMap((one) => supplyShapes(one.at, arms.supplyDirection(one.at))),
  ]
  const portKeys = new Set(ports.map(({ at }) => px(at).join()))
  const shapes: Shape[] = [
    ...lines.flatMap((shape) => openAtPorts(shape, portKeys)),
    ...arms.dots().map((at) => circle(at, 'dot', DOT_RADIUS)),
    ...ports.map(({ at }) => circle(at, 'port', PORT_RADIUS)),
  ]
  const fixed = [...opamps.flatMap(opampTexts), ...railTexts(circuit, arms)]
  const taken: Box[] = [...shapes.flatMap(shapeBoxes), ...passive.map(bodyBox), ...fixed.map(textBox)]
  const portTexts = placePoints(ports, 'port', taken)
  const labels = placeLabels(passive, taken)
  const nodeTexts = placePoints(circuit.names, 'node', taken)
  const models = placeModels(opamps, taken)
  return {
    viewBox: extent(taken),
    shapes,
    texts: [...fixed, ...portTexts, ...labels.texts, ...nodeTexts],
    values: labels.values,
    models,
    areas: [
      ...passive.map((part): PartArea => ({ ref: part.ref, line: part.span.line, ...bodyBox(part) })),
      ...opamps.map((part): PartArea => {
        const { left, tip, middle, half } = opampTriangle(part)
        const box = { left: Math.min(left, tip), right: Math.max(left, tip), top: middle - half, bottom: middle + half }
        return { ref: part.ref, line: part.span.line, ...box }
      }),
    ],
  }
}

/** Signs and designator inside the triangle. */
function opampTexts(part: OpampPart): DrawingText[] {
  const { direction, left, middle, minusY, plusY, tip } = opampTriangle(part)
  const inside = left + direction * 13
  const text = (role: 'sign' | 'opamp', x: number, y: number, text: string): DrawingText => ({
    role,
    x,
    y,
    anchor: 'middle',
    text,
    sub: '',
    ...(role === 'opamp' ? { ref: part.ref } : {}),
  })
  return [
    text('sign', inside, minusY + 5, '−'),
    text('sign', inside, plusY + 5, '+'),
    text('opamp', left + 0.42 * (tip - left), middle + 5, part.ref),
  ]
}

/** Names of references and supplies, beyond their symbols. */
function railTexts(circuit: Circuit, arms: Arms): DrawingText[] {
  const text = ({ at, name }: { at: GridPoint; name: string }, down: number): DrawingText => {
    const [x, y] = px(at)
    return { role: 'node', x, y: y + down, anchor: 'middle', ...nameParts(name) }
  }
  return [
    ...circuit.references.map((one) => text(one, 33)),
    ...circuit.supplies.map((one) => text(one, arms.supplyDirection(one.at) > 0 ? 27 : -16)),
  ]
}

/** A port's circle is open: lines end at its rim, so that it needs no fill. */
function openAtPorts(shape: Shape, portKeys: ReadonlySet<string>): Shape[] {
  if (shape.form !== 'polyline' || shape.style !== 'wire' || shape.closed) return [shape]
  const runs: [number, number][][] = [[]]
  const towards = ([x, y]: [number, number], [toX, toY]: [number, number]): [number, number] => [
    x + Math.sign(toX - x) * PORT_RADIUS,
    y + Math.sign(toY - y) * PORT_RADIUS,
  ]
  const points = withPortsBetween(shape.points, portKeys)
  points.forEach((point, k) => {
    if (!portKeys.has(point.join())) return runs.at(-1)!.push(point)
    if (k > 0) runs.at(-1)!.push(towards(point, points[k - 1]!))
    if (k < points.length - 1) runs.push([towards(point, points[k + 1]!)])
  })
  return runs.filter((run) => run.length > 1).map((run) => ({ ...shape, points: run }))
}

/** The points of a line, with each port that lies inside one of its runs. */
function withPortsBetween(points: [number, number][], portKeys: ReadonlySet<string>): [number, number][] {
  const ports = [...portKeys].map((key) => key.split(',').map(Number) as [number, number])
  return points.flatMap((point, k): [number, number][] => {
    const former = points[k - 1]
    if (!former) return [point]
    const [[ax, ay], [bx, by]] = [former, point]
    const along = ([x, y]: [number, number]) => Math.abs(x - ax) + Math.abs(y - ay)
    const between = ports.filter(
      ([x, y]) =>
        (ay === by && y === ay && (x - ax) * (x - bx) < 0) || (ax === bx && x === ax && (y - ay) * (y - by) < 0),
    )
    return [...between.sort((a, b) => along(a) - along(b)), point]
  })
}

/** Room taken by a shape: each run of a line by itself, so that a label may stand in a corner. */
function shapeBoxes(shape: Shape): Box[] {
  if (shape.form === 'circle') return [{ left: shape.x - 5, right: shape.x + 5, top: shape.y - 5, bottom: shape.y + 5 }]
  if (shape.form === 'path') return []
  const points = shape.closed ? [...shape.points, shape.points[0]!] : shape.points
  return points.slice(1).flatMap((to, k): Box[] => {
    const from = points[k]!
    // A slope is cut into pieces, so that a label may stand in its corner.
    const pieces = from[0] === to[0] || from[1] === to[1] ? 1 : 6
    return Array.from({ length: pieces }, (_, n) =>
      boxBetween(between(from, to, n / pieces), between(from, to, (n + 1) / pieces)),
    )
  })
}

const between = ([ax, ay]: [number, number], [bx, by]: [number, number], share: number): [number, number] => [
  ax + (bx - ax) * share,
  ay + (by - ay) * share,
]

const boxBetween = ([ax, ay]: [number, number], [bx, by]: [number, number]): Box => ({
  left: Math.min(ax, bx) - 1,
  right: Math.max(ax, bx) + 1,
  top: Math.min(ay, by) - 1,
  bottom: Math.max(ay, by) + 1,
})

function extent(boxes: Box[]): Drawing['viewBox'] {
  const least = (of: (box: Box) => number) => boxes.reduce((so, box) => Math.min(so, of(box)), Infinity)
  const [left, top] = [least((box) => box.left) - MARGIN, least((box) => box.top) - MARGIN]
  const [right, bottom] = [-least((box) => -box.right) + MARGIN, -least((box) => -box.bottom) + MARGIN]
  return boxes.length
    ? { x: left, y: top, width: right - left, height: bottom - top }
    : { x: 0, y: 0, width: STEP, height: STEP }
}
