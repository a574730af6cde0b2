import type { NetElement } from '../circuit/netlist/netlist'
import { ProblemError } from '../problems'
import { isSingular, openUnknowns } from './exact-degree'
import type { Tableau } from './tableau'

/**
 * Raises what makes a circuit singular, in words that name the node, part or port.
 * @param steady true for the equations at 0 Hz
 * @throws {ProblemError} 'circuit-singular' when the equations have no unique solution (at any frequency, or at 0 Hz)
 */
export function requireSolvable(equations: Tableau, elements: readonly NetElement[], steady: boolean): void {
  if (isSingular(equations.pencil, steady))
    throw new ProblemError('circuit-singular', describe(equations, elements, steady))
}

function describe({ pencil, unknowns, columnOf }: Tableau, elements: readonly NetElement[], steady: boolean): string {
  const open = openUnknowns(pencil, steady)
  const at = steady ? ' at 0 Hz' : ''
  const opamps = elements.filter((element) => element.kind === 'opamp')
  const nodes = open.flatMap((k) => {
    const unknown = unknowns[k]!
    return unknown.kind === 'voltage' ? [{ k, name: unknown.nodes[0]! }] : []
  })
  const loose = opamps.find((opamp) => nodes.some(({ k }) => k === columnOf(opamp.out)))
  if (loose) return `No feedback holds the output of ${loose.ref}${at}: its voltage has no unique value.`
  const [node] = nodes
  if (node && steady) return `Node ${node.name} floats: nothing but capacitors connect it at 0 Hz.`
  if (node) return `Node ${node.name} floats: nothing holds its voltage.`
  const names = open.flatMap((k) => {
    const unknown = unknowns[k]!
    return unknown.kind === 'current' ? [unknown] : []
  })
  const port = names.find(({ of }) => of === 'port')
  if (port) return `Port ${port.name} is shorted${at}: a source cannot drive it.`
  const driver = names.find(({ of }) => of === 'opamp')
  if (driver) return `The output of ${driver.name} drives a node that is held already${at}.`
  return `${names[0]?.name ?? 'The circuit'} carries a current with no unique value${at}.`
}
