import type { Problem } from '../../problems'
import type { Circuit, CircuitPart, GridPoint, SourceSpan } from '../part'
import { pinsOfPart, pointsOf } from '../points'
import { GRID_MAX } from './statement'

const PARTS_MAX = 400
const START: SourceSpan = { line: 1, column: 1, endColumn: 1 }

/**
 * Problems that single lines don't show: doubled names, parts on top of each other, pins in the air, missing ports.
 * @param complete false when lines could not be read; then nothing is said about what only those lines may lack
 */
export function checkCircuit(circuit: Circuit, complete: boolean): Problem[] {
  const problems: Problem[] = []
  const complain = (span: SourceSpan, detail: string) =>
    problems.push({ code: 'circuit-not-read', detail, line: span.line, column: span.column })

  doubledNames(circuit, complain)
  if (circuit.parts.length > PARTS_MAX) complain(START, `A circuit has at most ${PARTS_MAX} parts.`)
  else overlaps(circuit.parts, complain)
  outsideGrid(circuit, complain)
  if (!complete) return problems
  if (!circuit.ports.some((port) => port.role === 'input'))
    complain(START, 'The circuit has no input: write “input in 1,6”.')
  if (!circuit.ports.some((port) => port.role === 'output'))
    complain(START, 'The circuit has no output: write “output out 18,7”.')
  const touched = statementsAtPoints(circuit)
  for (const { point, span, what } of endsOf(circuit))
    if (touched[indexOf(point)]! < 2) complain(span, `${what} at ${point.x},${point.y} touches nothing.`)
  return problems
}

type Complain = (span: SourceSpan, detail: string) => void

function doubledNames(circuit: Circuit, complain: Complain) {
  const refs = new Map<string, SourceSpan>()
  for (const part of circuit.parts) {
    const former = refs.get(part.ref)
    if (former) complain(part.span, `${part.ref} stands already in line ${former.line}.`)
    else refs.set(part.ref, part.span)
  }
  const ports = new Set<string>()
  for (const port of circuit.ports) {
    if (ports.has(port.name)) complain(port.span, `There are two ports called ${port.name}.`)
    ports.add(port.name)
  }
}

function outsideGrid({ grid, ...circuit }: Circuit, complain: Complain) {
  for (const { point, span } of pointsOf(circuit))
    if (point.x > grid.width || point.y > grid.height)
      complain(span, `${point.x},${point.y} lies outside the grid of ${grid.width} x ${grid.height}.`)
}

function overlaps(parts: readonly CircuitPart[], complain: Complain) {
  const boxes = parts.map(bodyBox)
  parts.forEach((part, k) => {
    const other = boxes.findIndex(
      (box, j) =>
        j < k &&
        box.left < boxes[k]!.right &&
        box.right > boxes[k]!.left &&
        box.top < boxes[k]!.bottom &&
        box.bottom > boxes[k]!.top,
    )
    if (other >= 0) complain(part.span, `${part.ref} lies on top of ${parts[other]!.ref}.`)
  })
}

/** What a part covers, in steps: its run without the leads; an op-amp the whole triangle. */
function bodyBox(part: CircuitPart) {
  const pins = pinsOfPart(part).slice(0, 3)
  const [xs, ys] = [pins.map((p) => p.x), pins.map((p) => p.y)]
  const [left, right, top, bottom] = [Math.min(...xs), Math.max(...xs), Math.min(...ys), Math.max(...ys)]
  const beside = 0.3
  if (part.kind === 'opamp') return { left, right, top: top - beside, bottom: bottom + beside }
  const lead = 0.5
  return left === right
    ? { left: left - beside, right: right + beside, top: top + lead, bottom: bottom - lead }
    : { left: left + lead, right: right - lead, top: top - beside, bottom: bottom + beside }
}

interface End {
  point: GridPoint
  span: SourceSpan
  what: string
}

/** Everything that must be joined to something. */
function endsOf(circuit: Circuit): End[] {
  const end = (point: GridPoint, span: SourceSpan, what: string): End => ({ point, span, what })
  return [
    ...circuit.parts.flatMap((part) =>
      part.kind === 'opamp'
        ? [
            end(part.minus, part.span, `The inverting input of ${part.ref}`),
            end(part.plus, part.span, `The non-inverting input of ${part.ref}`),
            end(part.out, part.span, `The output of ${part.ref}`),
          ]
        : part.pins.map((point) => end(point, part.span, `The pin of ${part.ref}`)),
    ),
    ...circuit.ports.flatMap((port) =>
      [port.plus, ...(port.minus ? [port.minus] : [])].map((point) => end(point, port.span, `The port ${port.name}`)),
    ),
    ...circuit.grounds.map((one) => end(one.at, one.span, 'The ground')),
    ...circuit.references.map((one) => end(one.at, one.span, `The reference ${one.name}`)),
    ...circuit.supplies.map((one) => end(one.at, one.span, `The supply ${one.name}`)),
    ...circuit.names.map((one) => end(one.at, one.span, `The name ${one.name}`)),
    ...circuit.wires.flatMap((wire) =>
      [wire.points[0]!, wire.points.at(-1)!].map((point) => end(point, wire.span, 'The end of this wire')),
    ),
  ]
}

const indexOf = ({ x, y }: GridPoint) => y * (GRID_MAX + 1) + x

/** How many statements have a pin, a wire or a symbol at each grid point. */
function statementsAtPoints(circuit: Circuit): Uint16Array {
  const count = new Uint16Array((GRID_MAX + 1) ** 2)
  const lastLine = new Int32Array(count.length)
  const mark = (point: GridPoint, { line }: SourceSpan) => {
    const k = indexOf(point)
    if (lastLine[k] !== line) count[k]!++
    lastLine[k] = line
  }
  for (const { point, span } of pointsOf({ ...circuit, wires: [] })) mark(point, span)
  for (const wire of circuit.wires) forEachRunPoint(wire.points, (point) => mark(point, wire.span))
  return count
}

/** Visits every grid point that a wire runs over. */
export function forEachRunPoint(points: readonly GridPoint[], visit: (point: GridPoint, from: GridPoint) => void) {
  for (let k = 1; k < points.length; k++) {
    const [a, b] = [points[k - 1]!, points[k]!]
    const [dx, dy] = [Math.sign(b.x - a.x), Math.sign(b.y - a.y)]
    const steps = Math.abs(b.x - a.x) + Math.abs(b.y - a.y)
    for (let n = 0; n <= steps; n++) visit({ x: a.x + n * dx, y: a.y + n * dy }, a)
  }
}
