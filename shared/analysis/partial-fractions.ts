import type { Complex } from '../numerics/complex'
import { exponentialDifferences } from '../numerics/exponential-differences'
import { divide } from '../numerics/polynomial'
import type { RationalTransferFunction } from './rational'

/** Poles that lie together, and what they add to a function of time. */
interface Mode {
  poles: Complex[]
  /** Divided differences of all but these poles over the first, the first two, … of them, times rate^(count − 1). */
  weights: Complex[]
  rateRadPerSec: number
}

/** A function of time for t > 0: a sum of modes. */
export type Modes = readonly Mode[]

/** Poles nearer to each other than this, over their size, are taken together. */
const TOGETHER = 0.05

/**
 * Splits a rational function into what each group of neighbouring poles p_1 … p_m adds to its inverse Laplace
 * transform. With g(s) the function without these poles, that is the divided difference of g(s)·e^{st} over them: the
 * residue for one pole, the derivatives of the textbook for a repeated one, and without cancellation for poles that
 * nearly coincide.
 *
 * @param h its part that is no constant; a polynomial in s gives nothing for t > 0
 * @param integrations times that the function is divided by s
 * @returns modes, to be read by `modesAt`
 * Source: partial fractions as residues: R. V. Churchill, Operational Mathematics (from memory); divided differences as
 * the function of a bidiagonal matrix: G. Opitz, Z. Angew. Math. Mech. 44 (1964) T52.
 */
export function modesOf({ poles, zeros, gain }: RationalTransferFunction, integrations = 0): Modes {
  if (gain === 0) return []
  // Poles are told apart as objects, so that equal ones are.
  const all = [...poles.map((pole) => ({ ...pole })), ...Array.from({ length: integrations }, () => ({ re: 0, im: 0 }))]
  return grouped(all).map((group) => {
    const others = all.filter((pole) => !group.includes(pole))
    const rateRadPerSec = typicalSize(group) || typicalSize([...others, ...zeros]) || 1
    return { poles: group, weights: weightsOf(group, others, zeros, gain, rateRadPerSec), rateRadPerSec }
  })
}

/**
 * Value of a sum of modes.
 * @param timeSec t, s, ≥ 0
 */
export function modesAt(modes: Modes, timeSec: number): number {
  let sum = 0
  for (const { poles, weights, rateRadPerSec } of modes) {
    const differences = exponentialDifferences(poles, timeSec)
    let scale = 1
    for (let k = poles.length - 1; k >= 0; k--) {
      sum += scale * (weights[k]!.re * differences[k]!.re - weights[k]!.im * differences[k]!.im)
      scale *= rateRadPerSec * timeSec
    }
  }
  return sum
}

/** Poles in groups, each nearer to another of its group than to be told apart safely. */
function grouped(poles: readonly Complex[]): Complex[][] {
  const left = new Set(poles)
  const groups: Complex[][] = []
  for (const first of poles) {
    if (!left.delete(first)) continue
    const group = [first]
    for (const member of group)
      for (const pole of left) {
        const size = Math.max(Math.hypot(pole.re, pole.im), Math.hypot(member.re, member.im))
        if (!(Math.hypot(pole.re - member.re, pole.im - member.im) <= TOGETHER * size)) continue
        left.delete(pole)
        group.push(pole)
      }
    groups.push(group)
  }
  return groups
}

/**
 * First row of g(J), J the bidiagonal matrix of the group's poles with the rate above its diagonal: a row vector times
 * one factor of g after the other.
 */
function weightsOf(group: Complex[], others: Complex[], zeros: Complex[], gain: number, rate: number): Complex[] {
  const row = group.map((_, k) => ({ re: k === 0 ? gain : 0, im: 0 }))
  const count = Math.max(others.length, zeros.length)
  for (let factor = 0; factor < count; factor++) {
    const [zero, pole] = [zeros[factor], others[factor]]
    if (zero)
      for (let k = group.length - 1; k >= 0; k--) {
        const product = times(row[k]!, minus(group[k]!, zero))
        const before = k > 0 ? row[k - 1]! : { re: 0, im: 0 }
        row[k] = { re: product.re + rate * before.re, im: product.im + rate * before.im }
      }
    if (pole)
      for (let k = 0; k < group.length; k++) {
        const before = k > 0 ? row[k - 1]! : { re: 0, im: 0 }
        const rest = { re: row[k]!.re - rate * before.re, im: row[k]!.im - rate * before.im }
        row[k] = divide(rest, minus(group[k]!, pole))
      }
  }
  const unscale = rate ** (1 - group.length)
  return row.map(({ re, im }) => ({ re: re * unscale, im: im * unscale }))
}

function typicalSize(roots: readonly Complex[]): number {
  const logs = roots.flatMap(({ re, im }) => (re === 0 && im === 0 ? [] : [Math.log(Math.hypot(re, im))]))
  return logs.length ? Math.exp(logs.reduce((sum, x) => sum + x, 0) / logs.length) : 0
}

const minus = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im })
const times = (a: Complex, b: Complex): Complex => ({ re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re })
