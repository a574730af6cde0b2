import { splitName } from '../../formula/tex'
import { onRun, samePoint } from '../grammar/statement'
import type { Circuit, GridPoint, OpampPart, PassivePart } from '../part'
import type { Box, Drawing, DrawingStandard, DrawingText, Shape } from './drawing'
import { STEP } from './drawing'
import { placeLabels } from './labels'
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

const MARGIN = 8

/**
 * Draws a circuit: shapes, texts and the places of the live values. The same drawing serves the page, the sheet and the
 * editor; nothing in it is markup.
 * Source of the symbols: IEC 60617; IEEE 315 for the zigzag resistor.
 */
export function drawCircuit(circuit: Circuit, options: { standard?: DrawingStandard } = {}): Drawing {
  const standard = options.standard ?? 'iec'
  const passive = circuit.parts.filter((part): part is PassivePart => part.kind !== 'opamp')
  const opamps = circuit.parts.filter((part): part is OpampPart => part.kind === 'opamp')
  const shapes: Shape[] = [
    ...circuit.wires.map((wire): Shape => ({ form: 'polyline', style: 'wire', points: wire.points.map(px) })),
    ...passive.flatMap((part) => passiveShapes(part, standard)),
    ...opamps.flatMap(opampShapes),
    ...circuit.grounds.flatMap((one) => groundShapes(one.at)),
    ...circuit.references.flatMap((one) => referenceShapes(one.at)),
    ...circuit.supplies.flatMap((one) => supplyShapes(one.at)),
    ...junctions(circuit).map((p): Shape => ({
      form: 'circle',
      style: 'dot',
      x: p.x * STEP,
      y: p.y * STEP,
      radius: 3.6,
    })),
    ...portPoints(circuit).map(({ point }): Shape => ({
      form: 'circle',
      style: 'port',
      x: point.x * STEP,
      y: point.y * STEP,
      radius: 4.6,
    })),
  ]
  const texts = [...fixedTexts(circuit, opamps)]
  const taken: Box[] = [
    ...shapes.flatMap(shapeBoxes),
    ...passive.map(bodyBox),
    ...texts.map((text): Box => ({ left: text.x - 12, right: text.x + 12, top: text.y - 12, bottom: text.y + 4 })),
  ]
  const labels = placeLabels(passive, taken)
  return {
    viewBox: extent([...taken]),
    shapes,
    texts: [...texts, ...labels.texts],
    values: labels.values,
  }
}

/** Ports with the text that stands at each of their circles. */
function portPoints(circuit: Circuit): { point: GridPoint; text: string }[] {
  return circuit.ports.flatMap((port) =>
    port.minus
      ? [
          { point: port.plus, text: `${port.name}+` },
          { point: port.minus, text: `${port.name}−` },
        ]
      : [{ point: port.plus, text: port.name }],
  )
}

function fixedTexts(circuit: Circuit, opamps: OpampPart[]): DrawingText[] {
  const plain = (role: DrawingText['role'], x: number, y: number, text: string, ref?: string): DrawingText => ({
    role,
    x,
    y,
    anchor: 'middle',
    text,
    sub: '',
    ...(ref ? { ref } : {}),
  })
  return [
    ...portPoints(circuit).map(({ point, text }) => plain('port', point.x * STEP, point.y * STEP - 14, text)),
    ...opamps.flatMap((part) => {
      const { direction, left, middle, minusY, plusY, tip } = opampTriangle(part)
      const inside = left + direction * 13
      return [
        plain('sign', inside, minusY + 5, '−'),
        plain('sign', inside, plusY + 5, '+'),
        plain('opamp', left + 0.42 * (tip - left), middle + 5, part.ref, part.ref),
      ]
    }),
    ...circuit.references.map((one) => ({
      ...plain('node', one.at.x * STEP, one.at.y * STEP + 33, splitName(one.name)[0]),
      sub: splitName(one.name)[1],
    })),
    ...circuit.supplies.map((one) => plain('node', one.at.x * STEP, one.at.y * STEP - 16, one.name)),
  ]
}

/** Points where three or more ends meet, a run that passes counting as two. */
function junctions(circuit: Circuit): GridPoint[] {
  const pins = circuit.parts.flatMap((part) => (part.kind === 'opamp' ? [part.minus, part.plus, part.out] : part.pins))
  const single = [
    ...pins,
    ...[...circuit.grounds, ...circuit.references, ...circuit.supplies].map((one) => one.at),
    ...portPoints(circuit).map(({ point }) => point),
  ]
  const candidates = [...single, ...circuit.wires.flatMap((wire) => wire.points)]
  const found: GridPoint[] = []
  for (const p of candidates) {
    if (found.some((one) => samePoint(one, p))) continue
    let ends = single.filter((one) => samePoint(one, p)).length
    for (const wire of circuit.wires)
      for (let k = 1; k < wire.points.length; k++) {
        const [a, b] = [wire.points[k - 1]!, wire.points[k]!]
        if (samePoint(p, a) || samePoint(p, b)) ends += 1
        else if (onRun(p, a, b)) ends += 2
      }
    if (ends >= 3) found.push(p)
  }
  return found
}

/** Room taken by a shape: each run of a line by itself, so that a label may stand in a corner. */
function shapeBoxes(shape: Shape): Box[] {
  if (shape.form === 'circle') return [{ left: shape.x - 5, right: shape.x + 5, top: shape.y - 5, bottom: shape.y + 5 }]
  if (shape.form === 'path') return []
  const points = shape.closed ? [...shape.points, shape.points[0]!] : shape.points
  return points.slice(1).map(([x, y], k) => {
    const [fromX, fromY] = points[k]!
    return {
      left: Math.min(x, fromX) - 1,
      right: Math.max(x, fromX) + 1,
      top: Math.min(y, fromY) - 1,
      bottom: Math.max(y, fromY) + 1,
    }
  })
}

function extent(boxes: Box[]): Drawing['viewBox'] {
  const left = Math.min(...boxes.map((box) => box.left)) - MARGIN
  const top = Math.min(...boxes.map((box) => box.top)) - MARGIN
  const right = Math.max(...boxes.map((box) => box.right)) + MARGIN
  const bottom = Math.max(...boxes.map((box) => box.bottom)) + MARGIN
  return { x: left, y: top, width: right - left, height: bottom - top }
}
