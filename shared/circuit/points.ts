import type { Circuit, CircuitPart, GridPoint, SourceSpan } from './part'

/** The grid points at which a part can be joined; of an op-amp: minus, plus, out, then the supply pins if drawn. */
export const pinsOfPart = (part: CircuitPart): GridPoint[] =>
  part.kind === 'opamp' ? [part.minus, part.plus, part.out, ...(part.supply ?? [])] : part.pins

/** Every grid point that the statements of a circuit name, with its place in the text. */
export function pointsOf(circuit: Omit<Circuit, 'format' | 'grid'>): { point: GridPoint; span: SourceSpan }[] {
  return [
    ...circuit.parts.flatMap((part) => pinsOfPart(part).map((point) => ({ point, span: part.span }))),
    ...circuit.ports.flatMap((port) =>
      [port.plus, ...(port.minus ? [port.minus] : [])].map((point) => ({ point, span: port.span })),
    ),
    ...circuit.wires.flatMap((wire) => wire.points.map((point) => ({ point, span: wire.span }))),
    ...[...circuit.grounds, ...circuit.references, ...circuit.supplies, ...circuit.names].map((one) => ({
      point: one.at,
      span: one.span,
    })),
  ]
}
