import type { NetPort, Netlist } from '../circuit/netlist/netlist'
import { nameTex } from '../formula/tex'
import { drivenNodes, groundsOf } from './nodal-minors'

/**
 * The equations that H(s) follows from, as TeX: what holds the sources' nodes, v(plus) = v(minus) for each op-amp, and
 * the sum of currents that leave each node which neither a source nor an op-amp's output holds.
 *
 * @param nodes those nodes; the ones that a source joins in one group
 * @param nameOf name of a passive part in H(s)
 */
export function nodalEquations(
  netlist: Netlist,
  input: NetPort,
  nodes: readonly (readonly string[])[],
  nameOf: (ref: string) => string,
): string[] {
  const driven = drivenNodes(netlist, input)
  const grounds = groundsOf(netlist)
  const zero = new Set([...grounds, ...[...driven].flatMap(([node, halves]) => (halves === 0 ? [node] : []))])
  const voltage = (node: string) => (zero.has(node) ? '0' : nodeVoltage(node))
  const equations: string[] = []
  for (const [node, halves] of driven) if (halves === 0) equations.push(`${nodeVoltage(node)} = 0`)
  if (driven.get(input.plus) === 1 && driven.get(input.minus) === -1)
    equations.push(`${nodeVoltage(input.minus)} = -${nodeVoltage(input.plus)}`)
  for (const one of netlist.elements) {
    if (one.kind !== 'opamp' || one.minus === one.out) continue
    equations.push(
      zero.has(one.minus) ? `${voltage(one.plus)} = 0` : `${nodeVoltage(one.minus)} = ${voltage(one.plus)}`,
    )
  }
  for (const one of netlist.elements)
    if (one.kind === 'opamp' && one.minus === one.out) equations.push(`${nodeVoltage(one.out)} = ${voltage(one.plus)}`)
  const between = (plus: string, minus: string) =>
    zero.has(minus) ? voltage(plus) : zero.has(plus) ? `-${voltage(minus)}` : `${voltage(plus)} - ${voltage(minus)}`
  for (const { a, b, plus, minus, gain } of netlist.controlled ?? [])
    equations.push(`${between(a, b)} = ${numberTex(gain)}\\left(${between(plus, minus)}\\right)`)
  for (const group of nodes) {
    const currents = netlist.elements.flatMap((one) => {
      if (one.kind === 'opamp' || group.includes(one.a) === group.includes(one.b)) return []
      const [node, other] = group.includes(one.a) ? [one.a, one.b] : [one.b, one.a]
      const across = between(node, other)
      const part = nameTex(nameOf(one.ref))
      if (one.kind === 'resistor') return [`\\frac{${across}}{${part}}`]
      if (one.kind === 'inductor') return [`\\frac{${across}}{s\\,${part}}`]
      return [`s\\,${part}${zero.has(other) ? `\\,${across}` : `\\left(${across}\\right)`}`]
    })
    if (currents.length) equations.push(`${currents.join(' + ')} = 0`)
  }
  return equations
}

/** V_out, or V_out+ − V_out− for a pair. */
export function portVoltage(netlist: Netlist, { plus, minus }: NetPort): string {
  const grounds = groundsOf(netlist)
  if (grounds.has(minus)) return nodeVoltage(plus)
  return grounds.has(plus) ? `-${nodeVoltage(minus)}` : `${nodeVoltage(plus)} - ${nodeVoltage(minus)}`
}

/** Node names keep letters, digits, signs and underscores. */
const nodeVoltage = (node: string) =>
  `V_{\\mathrm{${node.replace(/[^\p{L}\p{N}_+-]/gu, '').replace(/_/g, '\\_') || 'x'}}}`

const numberTex = (value: number) => String(value).replace(/e\+?(-?\d+)/, '\\cdot 10^{$1}')
