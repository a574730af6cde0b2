/** A point on the drawing grid: whole steps, x to the right, y down. */
export interface GridPoint {
  x: number
  y: number
}

export type PassiveKind = 'resistor' | 'capacitor' | 'inductor'
export type PartKind = PassiveKind | 'opamp'

/** Unit of the value that a part of this kind takes. */
export const PART_UNITS = { resistor: 'Ω', capacitor: 'F', inductor: 'H' } as const

/** Line and column in the circuit text, both from 1, and the line's length up to its comment. */
export interface SourceSpan {
  line: number
  column: number
  endColumn: number
}

export type LabelSide = 'above' | 'below' | 'left' | 'right'

export interface PassivePart {
  kind: PassiveKind
  /** Reference designator as drawn: Ri, C1. */
  ref: string
  pins: [GridPoint, GridPoint]
  /** Where designator and value stand, when the editor chose; else one on each side of the body. */
  label?: LabelSide
  span: SourceSpan
}

export interface OpampPart {
  kind: 'opamp'
  ref: string
  minus: GridPoint
  plus: GridPoint
  out: GridPoint
  /** Supply pins, drawn when given: positive, negative. */
  supply?: [GridPoint, GridPoint]
  span: SourceSpan
}

export type CircuitPart = PassivePart | OpampPart

/** A port: one node against ground, or a pair. */
export interface PortSymbol {
  role: 'input' | 'output'
  name: string
  plus: GridPoint
  minus?: GridPoint
  span: SourceSpan
}

export interface WireRun {
  points: GridPoint[]
  span: SourceSpan
}

export interface GroundSymbol {
  at: GridPoint
  span: SourceSpan
}

/** A node that is not ground but is at ground for signals, unless `through` names the resistor that holds it. */
export interface ReferenceSymbol {
  name: string
  at: GridPoint
  through?: string
  span: SourceSpan
}

/** A supply rail; at ground for signals. */
export interface SupplySymbol {
  name: string
  at: GridPoint
  span: SourceSpan
}

export interface NodeName {
  name: string
  at: GridPoint
  span: SourceSpan
}

/** A circuit as written: what the drawing shows and what connectivity is found from. */
export interface Circuit {
  format: 1
  grid: { width: number; height: number }
  parts: CircuitPart[]
  ports: PortSymbol[]
  wires: WireRun[]
  grounds: GroundSymbol[]
  references: ReferenceSymbol[]
  supplies: SupplySymbol[]
  names: NodeName[]
}
