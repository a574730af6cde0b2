/** One step of the drawing grid, in drawing units (CSS px at full size). */
export const STEP = 26

export type ShapeStyle = 'wire' | 'body' | 'dot' | 'port' | 'sign'

/** A line or outline; points in drawing units. `path` where arcs are needed. */
export type Shape =
  | { form: 'polyline'; style: ShapeStyle; points: [number, number][]; closed?: boolean; ref?: string }
  | { form: 'circle'; style: ShapeStyle; x: number; y: number; radius: number }
  | { form: 'path'; style: ShapeStyle; d: string; ref?: string }

export type Anchor = 'start' | 'middle' | 'end'

export interface DrawingText {
  role: 'designator' | 'port' | 'sign' | 'opamp' | 'node'
  x: number
  y: number
  anchor: Anchor
  /** Letter and subscript. */
  text: string
  sub: string
  ref?: string
}

/** Where the live value of a part stands: baseline, and the room kept for it, drawing units. */
export interface ValueSlot {
  ref: string
  x: number
  y: number
  anchor: Anchor
  width: number
}

/** What a part covers, for pointing at it and for marking it; `line` of the circuit text, from 1. */
export interface PartArea extends Box {
  ref: string
  line: number
}

/** A circuit drawn: numbers and plain texts, no markup. */
export interface Drawing {
  viewBox: { x: number; y: number; width: number; height: number }
  shapes: Shape[]
  texts: DrawingText[]
  values: ValueSlot[]
  /** Where the op-amp chosen for a designator may be named. */
  models: ValueSlot[]
  areas: PartArea[]
}

export type DrawingStandard = 'iec' | 'ieee'

/** A box in drawing units, for finding room. */
export interface Box {
  left: number
  top: number
  right: number
  bottom: number
}

/** Area that two boxes share, square units. */
export const sharedArea = (a: Box, b: Box) =>
  Math.max(0, Math.min(a.right, b.right) - Math.max(a.left, b.left)) *
  Math.max(0, Math.min(a.bottom, b.bottom) - Math.max(a.top, b.top))
