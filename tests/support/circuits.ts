import { readFileSync } from 'node:fs'
import type { Amplifiers } from '#shared/analysis/op-amp/amplifier'
import type { ElementValues, NetElement, NetPort, Netlist } from '#shared/circuit/netlist/netlist'
import type { Complex } from '#shared/numerics/complex'

/** Complex vector as the check files write it. */
export interface CheckVector {
  re: number[]
  im: number[]
}

/** What the tests read of a file of tests/checks/circuits; its header names the source of the figures. */
export interface CircuitCheck {
  header: { what: string; source: string; generator: string; tolerance: Record<string, string> }
  name: string
  function: string
  order: number
  topology: string
  parts: Record<string, number>
  opamp: { A0: number; GBW_Hz: number; e_n: number; i_n: number }
  inputs: Record<string, number>
  outputs: Record<string, string>
  netlist: { source: string[]; ideal: string[]; one_pole: string[] }
  closed_form: {
    H: Record<string, string>
    num: Record<string, string[]>
    den: Record<string, string[]>
    figures: Record<string, string>
  }
  figures: Record<string, number>
  measured: Record<string, { ideal: Record<string, number>; one_pole: Record<string, number> }>
  response: { frequency_Hz: number[] } & Record<string, { ideal: CheckVector; one_pole: CheckVector }>
  poles_zeros_ideal: Record<string, { zeros: CheckVector; poles: CheckVector }>
  poles_one_pole: CheckVector
  group_delay_ideal_s: { frequency_Hz: number[] } & Record<string, number[]>
  input_impedance: { frequency_Hz: number[]; ideal: CheckVector; one_pole: CheckVector; closed_form?: string }
  noise: {
    temperature_K: number
    frequency_Hz: number[]
    band_Hz: [number, number]
    outputs: Record<string, { ideal: CheckNoise; one_pole: CheckNoise }>
  }
}

/** Noise at one output: densities in V/√Hz, integrals in V rms. */
export interface CheckNoise {
  density_total: number[]
  integrated_total: number
  density_by_contributor: Record<string, number[]>
  integrated_by_contributor: Record<string, number>
}

/** The circuits whose outside figures are kept in tests/checks/circuits. */
export const CHECK_CIRCUITS = [
  'lp1-inverting',
  'hp1-inverting',
  'bp-wide-inverting',
  'lp1-noninverting-gain',
  'lp2-sallen-key-unity',
  'lp2-mfb',
  'lp2-sallen-key-gain',
  'hp2-sallen-key-unity',
  'bp2-mfb',
  'bp-cascade-lp1-hp1',
  'ap1-noninverting',
  'biquad-tow-thomas',
] as const

export const readCheck = (name: string): CircuitCheck =>
  JSON.parse(readFileSync(new URL(`../checks/circuits/${name}.json`, import.meta.url), 'utf8')) as CircuitCheck

/** The circuit of a check file with ideal op-amps, from its SPICE cards. */
export const netlistOfCheck = (name: string): Netlist => {
  const { inputs, outputs, netlist } = readCheck(name)
  const ports = (nodes: Record<string, string>): NetPort[] =>
    Object.entries(nodes).map(([label, plus]) => ({ name: label, plus, minus: '0' }))
  const driven = Object.keys(inputs)
  const pair = driven.length === 2 && driven.some((node) => inputs[node]! < 0)
  return netlistOf(netlist.ideal, {
    inputs: pair
      ? [{ name: 'in', plus: driven.find((n) => inputs[n]! > 0)!, minus: driven.find((n) => inputs[n]! < 0)! }]
      : ports(Object.fromEntries(driven.map((node) => [node, node]))),
    outputs: ports(outputs),
  })
}

/** Every op-amp of a check circuit with the one record of its file: one pole, or ideal but for its noise. */
export const amplifiersOfCheck = (name: string, model: 'ideal' | 'one_pole'): Amplifiers => {
  const { A0, GBW_Hz, e_n, i_n } = readCheck(name).opamp
  const gain = model === 'one_pole' ? { openLoopGain: A0, gbwHz: GBW_Hz } : {}
  const opamps = netlistOfCheck(name).elements.filter(({ kind }) => kind === 'opamp')
  return Object.fromEntries(opamps.map(({ ref }) => [ref, { ...gain, noiseVoltPerRtHz: e_n, noiseAmpPerRtHz: i_n }]))
}

export const valuesOfCheck = (name: string): ElementValues => readCheck(name).parts

/**
 * A netlist from cards: `R1 in a 5100`, `C1 a 0`, `EU1 out 0 p n 1e9` (op-amp U1, out, plus and minus); values are
 * left to `valuesOf`.
 */
export function netlistOf(
  cards: string[],
  {
    inputs = [{ name: 'in', plus: 'in', minus: '0' }],
    outputs = [{ name: 'out', plus: 'out', minus: '0' }],
    signalGrounds = [],
  }: Partial<Pick<Netlist, 'inputs' | 'outputs' | 'signalGrounds'>> = {},
): Netlist {
  const elements = cards.map((card): NetElement => {
    const [name, a, b, plus, minus] = card.split(/\s+/) as [string, string, string, string, string]
    if (name.startsWith('E')) return { kind: 'opamp', ref: name.slice(1), out: a, plus, minus }
    const kind = ({ R: 'resistor', C: 'capacitor', L: 'inductor' } as const)[name[0]! as 'R' | 'C' | 'L']
    return { kind, ref: name, a, b }
  })
  const nodes = new Set(['0'])
  for (const element of elements)
    for (const node of element.kind === 'opamp' ? [element.plus, element.minus, element.out] : [element.a, element.b])
      nodes.add(node)
  return { nodes: [...nodes], elements, inputs, outputs, signalGrounds }
}

/** The values in the last field of each card. */
export const valuesOf = (cards: string[]): ElementValues =>
  Object.fromEntries(
    cards.filter((card) => !card.startsWith('E')).map((card) => [card.split(/\s+/)[0]!, Number(card.split(/\s+/)[3])]),
  )

/** The vector of a check file as complex numbers. */
export const complexOf = ({ re, im }: CheckVector): Complex[] => re.map((x, k) => ({ re: x, im: im[k]! }))

/** Holds two sets of complex numbers against each other: the largest distance, each to its nearest, over its size. */
export function setDistance(got: readonly Complex[], wanted: readonly Complex[]): number {
  if (got.length !== wanted.length) return Infinity
  const left = [...got]
  return wanted.reduce((worst, w) => {
    const gap = (z: Complex) => Math.hypot(z.re - w.re, z.im - w.im)
    const nearest = left.reduce((best, z, k) => (gap(z) < gap(left[best]!) ? k : best), 0)
    const [taken] = left.splice(nearest, 1)
    return Math.max(worst, gap(taken!) / (Math.hypot(w.re, w.im) || 1))
  }, 0)
}
