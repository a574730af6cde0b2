import type { Circuit, CircuitPart, GridPoint, PortSymbol } from '../part'

const LETTERS = { resistor: 'R', capacitor: 'C', inductor: 'L' } as const
const at = (p: GridPoint) => `${p.x},${p.y}`

/** Writes a circuit as text that readCircuit takes back to the same circuit. */
export function writeCircuit(circuit: Circuit): string {
  const lines = [
    'format 1',
    `grid ${circuit.grid.width} x ${circuit.grid.height}`,
    ...circuit.ports.filter((port) => port.role === 'input').map(portLine),
    ...circuit.parts.map(partLine),
    ...circuit.wires.map((wire) => `wire ${wire.points.map(at).join(' ')}`),
    ...circuit.grounds.map((one) => `ground ${at(one.at)}`),
    ...circuit.references.map(
      (one) => `reference ${one.name} ${at(one.at)}${one.through ? ` through ${one.through}` : ''}`,
    ),
    ...circuit.supplies.map((one) => `supply ${one.name} ${at(one.at)}`),
    ...circuit.names.map((one) => `name ${one.name} ${at(one.at)}`),
    ...circuit.ports.filter((port) => port.role === 'output').map(portLine),
  ]
  return `${lines.join('\n')}\n`
}

const portLine = (port: PortSymbol) =>
  port.minus
    ? `${port.role} ${port.name} + ${at(port.plus)} - ${at(port.minus)}`
    : `${port.role} ${port.name} ${at(port.plus)}`

function partLine(part: CircuitPart): string {
  if (part.kind !== 'opamp')
    return `${LETTERS[part.kind]} ${part.ref} ${part.pins.map(at).join(' ')}${part.label ? ` label ${part.label}` : ''}`
  const supply = part.supply ? ` supply ${part.supply.map(at).join(' ')}` : ''
  return `opamp ${part.ref} - ${at(part.minus)} + ${at(part.plus)} out ${at(part.out)}${supply}`
}
