import { equationsOf, portOf, prepareCircuit } from '../analysis/nodal-analysis'
import type { Netlist } from '../circuit/netlist/netlist'
import type { PassiveKind } from '../circuit/part'
import type { Complex } from '../numerics/complex'
import { divide } from '../numerics/polynomial'
import { greatestCommonDivisor } from './common-factor'
import { exactNumber } from './exact-ratio'
import { nodalEquations, portVoltage } from './nodal-equations'
import type { AdmittanceRatio, AdmittanceSum } from './nodal-minors'
import { admittanceRatio } from './nodal-minors'
import type { Polynomial } from './polynomial'
import { ONE, ZERO, addScaled, divideExactly, evaluatePolynomial, powerOf } from './polynomial'
import { readingForm } from './reading-form'

/** H(s) in part names: numerator over denominator without a common factor. */
export interface SymbolicTransferFunction {
  /** Variable 0 is s, then resistors, inductors and capacitors by name. */
  variables: readonly string[]
  numerator: Polynomial
  denominator: Polynomial
  /** In mathjs syntax with s and part names, grouped for reading. */
  text: string
  /** The same as TeX. */
  tex: string
  /** TeX: nodal equations, and H(s) at last. */
  equations: string[]
}

export interface SymbolicAsked {
  /** Names of ports; the first by default. */
  input?: string | undefined
  output?: string | undefined
  /** Name of a part in H(s), such as that of the entry which several matched parts share; its designator by default. */
  nameOf?: ((ref: string) => string) | undefined
}

/**
 * H(s) of a circuit with ideal op-amps in its own part names, exact: voltage at an output over that at an input, the
 * other inputs at 0 V, a pair driven in balance. The gain of a controlled source stands as its number.
 *
 * @throws {ProblemError} 'circuit-singular' naming the node or part; 'circuit-too-large' beyond 30 passive parts, 24
 *   unknown voltages or 2000 terms, within bounded time; 'output-unknown'
 * @example symbolicTransferFunction(netlist).text // '-(Rf/Ri)/(1 + s*Rf*Cf)'
 * Source: nodal-minors.ts for the determinants, common-factor.ts for the simplification.
 */
export function symbolicTransferFunction(netlist: Netlist, asked: SymbolicAsked = {}): SymbolicTransferFunction {
  const { nameOf = (ref: string) => ref } = asked
  const input = portOf(netlist.inputs, asked.input, 'input')
  const output = portOf(netlist.outputs, asked.output, 'output')
  requireUnique(netlist, asked.input)
  const ratio = admittanceRatio(netlist, asked.input, asked.output)
  const { variables, kinds } = variablesFor(ratio.passive, nameOf)
  const index = ratio.passive.map((one) => variables.indexOf(nameOf(one.ref)))
  const [above, below] = [ratio.numerator, ratio.denominator].map((sum) => clearedOf(sum, ratio, index)) as [
    Polynomial,
    Polynomial,
  ]
  const common = above.size === 0 ? below : greatestCommonDivisor(above, below)
  const numerator = divideExactly(above, common)!
  const denominator = above.size === 0 ? ONE : divideExactly(below, common)!
  const reactive = new Set(kinds.flatMap((kind, k) => (kind === 'capacitor' || kind === 'inductor' ? [k] : [])))
  const { text, tex } = readingForm(numerator, denominator, { names: variables, reactive })
  const [vOut, vIn] = [portVoltage(netlist, output), portVoltage(netlist, input)]
  const equations = nodalEquations(netlist, input, ratio.nodes, nameOf)
  return {
    variables,
    numerator,
    denominator,
    text,
    tex,
    equations: [...equations, `H(s) = \\frac{${vOut}}{${vIn}} = ${tex}`],
  }
}

/**
 * H at one complex frequency.
 * @param values ohm, farad, henry by the names of H(s)
 * @param s rad/s
 */
export function symbolicAt(h: SymbolicTransferFunction, values: Readonly<Record<string, number>>, s: Complex): Complex {
  const at = h.variables.map((name, k) => (k === 0 ? s : { re: values[name]!, im: 0 }))
  return divide(evaluatePolynomial(h.numerator, at), evaluatePolynomial(h.denominator, at))
}

/** Lets the analysis in numbers say what floats, in its own words. */
function requireUnique(netlist: Netlist, input: string | undefined): void {
  const values = netlist.elements.map(({ ref }, k): [string, number] => [ref, 1 + k / 7])
  equationsOf(prepareCircuit(netlist, { input }), Object.fromEntries(values), false)
}

function variablesFor(passive: AdmittanceRatio['passive'], nameOf: (ref: string) => string) {
  const kindOf = new Map<string, PassiveKind>()
  for (const one of passive) kindOf.set(nameOf(one.ref), one.kind)
  const rank = (name: string) => ['resistor', 'inductor', 'capacitor'].indexOf(kindOf.get(name)!)
  const names = [...kindOf.keys()].sort((a, b) => rank(a) - rank(b) || compareNames(a, b))
  return { variables: ['s', ...names], kinds: [null, ...names.map((name) => kindOf.get(name)!)] }
}

/** R2 before R10, whatever the language of the machine. */
function compareNames(a: string, b: string): number {
  const [[headA, tailA], [headB, tailB]] = [a, b].map((name) => /^(.*?)(\d*)$/.exec(name)!.slice(1)) as [
    [string, string],
    [string, string],
  ]
  return headA < headB ? -1 : headA > headB ? 1 : Number(tailA) - Number(tailB)
}

/** Multiplied through by every resistance and s·inductance: no part is left under a bar. Gains are put in exactly. */
function clearedOf(sum: AdmittanceSum, { passive, sources }: AdmittanceRatio, index: readonly number[]): Polynomial {
  const gains = sources.map(({ gain }) => exactGain(gain))
  const terms = new Map<bigint, bigint>()
  for (const [set, coefficient] of sum) {
    let monomial = 0n
    passive.forEach(({ kind }, k) => {
      const inside = (set >>> k) & 1
      if (kind === 'capacitor' ? inside : !inside) monomial += powerOf(index[k]!)
      if (kind === 'capacitor' ? inside : kind === 'inductor' && !inside) monomial += powerOf(0)
    })
    const factor = gains.reduce(
      (product, [above, below], k) => product * ((set >>> (passive.length + k)) & 1 ? above : below),
      BigInt(coefficient),
    )
    terms.set(monomial, (terms.get(monomial) ?? 0n) + factor)
  }
  // Parts that share a name may cancel.
  return addScaled(ZERO, terms)
}

/** A gain as numerator and denominator of the decimal that it is written as. */
function exactGain(gain: number): [bigint, bigint] {
  const { above, below } = exactNumber(Math.abs(gain))
  const size = above.get(0n) ?? 0n
  return [gain < 0 ? -size : size, below.get(0n)!]
}
