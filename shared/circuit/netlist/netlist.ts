import type { PassiveKind } from '../part'

export const GROUND = '0'

export interface PassiveElement {
  kind: PassiveKind
  ref: string
  a: string
  b: string
}

/** Op-amp as nullor: no current into plus and minus, v(plus) = v(minus), any current at out. */
export interface OpampElement {
  kind: 'opamp'
  ref: string
  plus: string
  minus: string
  out: string
}

export type NetElement = PassiveElement | OpampElement

/** A voltage source that follows another voltage: v(a) − v(b) = gain·(v(plus) − v(minus)). */
export interface ControlledSource {
  ref: string
  a: string
  b: string
  plus: string
  minus: string
  /** V/V. */
  gain: number
}

export interface NetPort {
  name: string
  plus: string
  minus: string
}

/**
 * What a circuit is electrically. Node names: '0' ground; port names (a pair: `in+`, `in-`); names given in the text;
 * else `n` inverting and `p` non-inverting input of an op-amp (with a digit when there are several), else a, b, c …
 */
export interface Netlist {
  nodes: string[]
  elements: NetElement[]
  inputs: NetPort[]
  outputs: NetPort[]
  /** Nodes held at ground for signals: references without impedance, and supplies. */
  signalGrounds: string[]
  /** Sources of E cards, and of V cards that share a drive; none when left out. */
  controlled?: ControlledSource[] | undefined
}

/** Values of the passive elements by designator: ohm, farad or henry, by kind. */
export type ElementValues = Readonly<Record<string, number>>
