import type { Problem } from '../../problems'
import type { Circuit, GridPoint, SourceSpan } from '../part'
import { onRun, samePoint } from './statement'

const PARTS_MAX = 400

/** Problems that only the whole circuit shows: doubled names, pins in the air, missing ports. */
export function checkCircuit(circuit: Circuit): Problem[] {
  const problems: Problem[] = []
  const complain = (span: SourceSpan, detail: string) =>
    problems.push({ code: 'circuit-not-read', detail, line: span.line, column: span.column })
  const start = { line: 1, column: 1, endColumn: 1 }

  if (circuit.parts.length > PARTS_MAX) complain(start, `A circuit has at most ${PARTS_MAX} parts.`)
  if (!circuit.ports.some((port) => port.role === 'input'))
    complain(start, 'The circuit has no input: write “input in 1,6”.')
  if (!circuit.ports.some((port) => port.role === 'output'))
    complain(start, 'The circuit has no output: write “output out 18,7”.')

  const refs = new Map<string, SourceSpan>()
  for (const part of circuit.parts) {
    const former = refs.get(part.ref)
    if (former) complain(part.span, `${part.ref} stands already in line ${former.line}.`)
    refs.set(part.ref, part.span)
  }
  const ports = new Set<string>()
  for (const port of circuit.ports) {
    if (ports.has(port.name)) complain(port.span, `There are two ports called ${port.name}.`)
    ports.add(port.name)
  }

  for (const { point, span, what } of pinsOf(circuit))
    if (!touchesAnother(circuit, point, span)) complain(span, `${what} at ${point.x},${point.y} touches nothing.`)
  return problems
}

interface Pin {
  point: GridPoint
  span: SourceSpan
  what: string
}

/** Everything that must be joined to something. */
function pinsOf(circuit: Circuit): Pin[] {
  return [
    ...circuit.parts.flatMap((part): Pin[] =>
      part.kind === 'opamp'
        ? [
            { point: part.minus, span: part.span, what: `The inverting input of ${part.ref}` },
            { point: part.plus, span: part.span, what: `The non-inverting input of ${part.ref}` },
            { point: part.out, span: part.span, what: `The output of ${part.ref}` },
          ]
        : part.pins.map((point) => ({ point, span: part.span, what: `The pin of ${part.ref}` })),
    ),
    ...circuit.ports.flatMap((port) =>
      [port.plus, ...(port.minus ? [port.minus] : [])].map((point) => ({
        point,
        span: port.span,
        what: `The port ${port.name}`,
      })),
    ),
    ...circuit.grounds.map((one) => ({ point: one.at, span: one.span, what: 'The ground' })),
    ...circuit.wires.flatMap((wire) =>
      [wire.points[0]!, wire.points.at(-1)!].map((point) => ({ point, span: wire.span, what: 'The end of this wire' })),
    ),
  ]
}

/** True when some other statement has a pin, a wire or a symbol at the point. */
function touchesAnother(circuit: Circuit, point: GridPoint, own: SourceSpan): boolean {
  const other = (span: SourceSpan) => span.line !== own.line
  return (
    circuit.wires.some(
      (wire) => other(wire.span) && wire.points.some((p, k) => k > 0 && onRun(point, wire.points[k - 1]!, p)),
    ) ||
    circuit.parts.some(
      (part) =>
        other(part.span) &&
        (part.kind === 'opamp' ? [part.minus, part.plus, part.out, ...(part.supply ?? [])] : part.pins).some((p) =>
          samePoint(p, point),
        ),
    ) ||
    circuit.ports.some(
      (port) => other(port.span) && (samePoint(port.plus, point) || (port.minus && samePoint(port.minus, point))),
    ) ||
    [...circuit.grounds, ...circuit.references, ...circuit.supplies].some(
      (one) => other(one.span) && samePoint(one.at, point),
    )
  )
}
