import { ProblemError } from '../../problems'
import type { ElementValues, NetElement, Netlist } from './netlist'

/** Gain of the voltage-controlled source that stands for an ideal op-amp. */
const IDEAL_GAIN = '1e9'

/**
 * The elements of a netlist as SPICE cards: R, C, L with values in ohm, farad, henry; an ideal op-amp U1 as a source EU1
 * of gain 1e9. References and supplies become sources of 0 V.
 * @throws {ProblemError} 'part-missing' when a part has no value
 * @example spiceCards(netlist, { Ri: 10e3, Rf: 100e3, Cf: 1.5e-9 }) // ['Ri in n 10000', …, 'EU1 out 0 0 n 1e9']
 */
export function spiceCards(netlist: Netlist, values: ElementValues): string[] {
  const valueFor = ({ ref }: NetElement) => {
    if (!Object.hasOwn(values, ref)) throw new ProblemError('part-missing', `${ref} has no value.`)
    return String(values[ref])
  }
  return [
    ...netlist.elements.map((one) =>
      one.kind === 'opamp'
        ? `E${one.ref} ${one.out} 0 ${one.plus} ${one.minus} ${IDEAL_GAIN}`
        : `${one.ref} ${one.a} ${one.b} ${valueFor(one)}`,
    ),
    ...netlist.signalGrounds.map((node, k) => `Vground${k + 1} ${node} 0 0`),
  ]
}
