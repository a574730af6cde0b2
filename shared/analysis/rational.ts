import type { ElementValues } from '../circuit/netlist/netlist'
import type { Complex } from '../numerics/complex'
import { divide, polynomialFromRoots } from '../numerics/polynomial'
import { commonRoots, degreesOf, exactDeterminant } from './exact-degree'
import type { PreparedCircuit } from './nodal-analysis'
import { equationsOf, portOf } from './nodal-analysis'
import type { Pencil } from './pencil'
import { PencilSolver } from './pencil'
import { pencilRoots } from './pencil-roots'
import type { Tableau } from './tableau'
import { portSelection } from './tableau'

/** H(s) = gain · Π(s − zero)/Π(s − pole), the same as numerator over denominator. */
export interface RationalTransferFunction {
  /** Real coefficients in descending powers of s; [0] where nothing comes through. */
  numerator: number[]
  /** Real coefficients in descending powers of s, 1 in front. */
  denominator: number[]
  /** rad/s; complex ones in conjugate pairs. */
  poles: Complex[]
  /** rad/s; those at 0 exactly there, those on the imaginary axis too. */
  zeros: Complex[]
  /** Ratio of the leading coefficients, signed. */
  gain: number
}

/** A second-order pair of poles: s² + s·ω₀/Q + ω₀². */
export interface PolePair {
  naturalHz: number
  q: number
}

/**
 * H(s) of a circuit at given values. Poles and zeros are found on the circuit's equations; how many there are, and how
 * many cancel, is decided in exact arithmetic.
 *
 * @param values ohm, farad, henry by designator
 * @param output name of the output, the prepared one by default
 * @throws {ProblemError} 'part-missing', 'circuit-singular', 'output-unknown'
 */
export function rationalTransferFunction(
  prepared: PreparedCircuit,
  values: ElementValues,
  output?: string,
): RationalTransferFunction {
  const port = output === undefined ? prepared.output : portOf(prepared.netlist.outputs, output, 'output')
  const equations = equationsOf(prepared, values, false)
  const read = portSelection(equations, port)
  const through = bordered(equations, read)
  const below = exactDeterminant(equations.pencil)
  const above = exactDeterminant(through)
  const degrees = degreesOf(above)
  let poles = pencilRoots(equations.pencil, degreesOf(below), equations.rateRadPerSec)
  if (degrees.degree < 0) return { numerator: [0], denominator: polynomialFromRoots(poles), poles, zeros: [], gain: 0 }
  let zeros = pencilRoots(through, degrees, equations.rateRadPerSec)
  for (let left = commonRoots(below, above); left > 0; left--) [poles, zeros] = withoutNearest(poles, zeros)
  const gain = leadingGain(equations, read, poles, zeros)
  return {
    numerator: polynomialFromRoots(zeros).map((c) => c * gain),
    denominator: polynomialFromRoots(poles),
    poles,
    zeros,
    gain,
  }
}

/**
 * Natural frequencies of a circuit, the source at rest: every pole, whether an output shows it or not.
 * @param values ohm, farad, henry by designator
 * @returns rad/s; complex ones in conjugate pairs
 * @throws {ProblemError} 'part-missing', 'circuit-singular'
 */
export function naturalFrequencies(prepared: PreparedCircuit, values: ElementValues): Complex[] {
  const { pencil, rateRadPerSec } = equationsOf(prepared, values, false)
  return pencilRoots(pencil, degreesOf(exactDeterminant(pencil)), rateRadPerSec)
}

/** The equations with the source as an unknown more and "output = 0" as its row: singular at the zeros of H. */
function bordered({ pencil, rhs }: Tableau, read: [number, number][]): Pencil {
  const { size } = pencil
  const { row, column, g, c } = pencil
  const through = { size: size + 1, row: [...row], column: [...column], g: [...g], c: [...c] }
  const entry = (i: number, j: number, value: number) => {
    through.row.push(i)
    through.column.push(j)
    through.g.push(value)
    through.c.push(0)
  }
  rhs.forEach((b, i) => b !== 0 && entry(i, size, -b))
  read.forEach(([j, sign]) => entry(size, j, sign))
  return through
}

/** Takes away the pole and the zero that lie nearest to each other, with their conjugates when they have them. */
function withoutNearest(poles: Complex[], zeros: Complex[]): [Complex[], Complex[]] {
  let best = { pole: -1, zero: -1, gap: Infinity }
  poles.forEach((p, pole) =>
    zeros.forEach((z, zero) => {
      const size = Math.hypot(p.re, p.im)
      const gap = size === 0 && z.re === 0 && z.im === 0 ? 0 : Math.hypot(p.re - z.re, p.im - z.im) / size
      if (gap < best.gap) best = { pole, zero, gap }
    }),
  )
  return [poles.filter((_, k) => k !== best.pole), zeros.filter((_, k) => k !== best.zero)]
}

/** H at a real point well away from all poles and zeros, over what these give there. */
function leadingGain(equations: Tableau, read: [number, number][], poles: Complex[], zeros: Complex[]): number {
  const sizes = [...poles, ...zeros].map(({ re, im }) => Math.hypot(re, im)).filter((size) => size > 0)
  const centre = sizes.length
    ? Math.exp(sizes.reduce((sum, size) => sum + Math.log(size), 0) / sizes.length)
    : equations.rateRadPerSec
  const clearance = (s: number) =>
    Math.min(...[...poles, ...zeros].map(({ re, im }) => Math.hypot(s - re, im) / (s + Math.hypot(re, im))), 1)
  const at = [1, 0.6, 1.7, 0.3, 3]
    .map((share) => share * centre)
    .reduce((a, b) => (clearance(b) > clearance(a) ? b : a))
  const solver = new PencilSolver(equations.pencil)
  solver.at(at, 0)
  const x = solver.solve(equations.rhs)
  let h = { re: read.reduce((sum, [column, sign]) => sum + sign * x.re[column]!, 0), im: 0 }
  const count = Math.max(poles.length, zeros.length)
  for (let k = 0; k < count; k++) {
    const [p, z] = [poles[k], zeros[k]]
    if (p) h = times(h, { re: at - p.re, im: -p.im })
    if (z) h = divide(h, { re: at - z.re, im: -z.im })
  }
  return h.re
}

const times = (a: Complex, b: Complex): Complex => ({ re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re })

/**
 * H at a frequency from poles and zeros.
 * @param frequencyHz Hz, ≥ 0
 * @returns V/V; infinite at a pole
 */
export function gainAt({ poles, zeros, gain }: RationalTransferFunction, frequencyHz: number): Complex {
  const w = 2 * Math.PI * frequencyHz
  let h: Complex = { re: gain, im: 0 }
  const count = Math.max(poles.length, zeros.length)
  for (let k = 0; k < count; k++) {
    const [p, z] = [poles[k], zeros[k]]
    if (z) h = times(h, { re: -z.re, im: w - z.im })
    if (!p) continue
    if (p.re === 0 && p.im === w) return { re: Infinity, im: 0 }
    h = divide(h, { re: -p.re, im: w - p.im })
  }
  return h
}

/**
 * Pole pairs: each complex pair, and real poles two by two from the lowest. A real pole left over belongs to no pair,
 * nor does one at 0. Q is below ½ for real poles, infinite on the imaginary axis and negative in the right half.
 *
 * @param poles rad/s
 * @returns ascending natural frequency, then ascending Q
 */
export function polePairs(poles: readonly Complex[]): PolePair[] {
  const pairs = poles
    .filter(({ im }) => im > 0)
    .map(({ re, im }) => {
      const size = Math.hypot(re, im)
      return { naturalHz: size / (2 * Math.PI), q: re === 0 ? Infinity : -size / (2 * re) }
    })
  const real = poles
    .filter(({ re, im }) => im === 0 && re !== 0)
    .map(({ re }) => re)
    .sort((a, b) => Math.abs(a) - Math.abs(b))
  for (let k = 0; k + 1 < real.length; k += 2) {
    const size = Math.sqrt(Math.abs(real[k]! * real[k + 1]!))
    pairs.push({ naturalHz: size / (2 * Math.PI), q: -size / (real[k]! + real[k + 1]!) })
  }
  return pairs.sort((a, b) => a.naturalHz - b.naturalHz || a.q - b.q)
}
