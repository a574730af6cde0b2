import type { Problem } from '../problems'
import { ProblemError } from '../problems'

/** One designator with its nominal value and how far it may lie from it. */
export interface Spread {
  /** Designator: Ri, C1, R1a. */
  ref: string
  /** Calculator entry that the designator belongs to, when several matched ones share it: R1 of R1a and R1b. */
  part?: string
  /** Ohm, farad or henry, > 0. */
  nominal: number
  /** Fraction, 0 ≤ tolerance < 1: 0.01 is ±1 %. */
  tolerance: number
}

/** One calculator entry: a part, or several matched designators that share value and tolerance. */
export interface TolerancedPart {
  name: string
  /** Designators; the name alone when left out. */
  refs?: readonly string[]
  nominal: number
  tolerance: number
}

/** Spreads matched parts out, so that each designator has its own draw and its own corner. */
export const spreadsOf = (parts: readonly TolerancedPart[]): Spread[] =>
  parts.flatMap(({ name, refs = [name], nominal, tolerance }) =>
    refs.map((ref): Spread => (ref === name ? { ref, nominal, tolerance } : { ref, part: name, nominal, tolerance })),
  )

/** Nominal values, in the order of the spreads. */
export const nominalValues = (spreads: readonly Spread[]): Float64Array =>
  Float64Array.from(spreads, ({ nominal }) => nominal)

/**
 * Refuses spreads that cannot be built, all at once.
 * @throws {ProblemError} 'value-not-positive', 'value-out-of-range' naming each designator
 */
export function requireSpreads(spreads: readonly Spread[]): void {
  const problems = spreads.flatMap(({ ref, nominal, tolerance }): Problem[] => {
    const found: Problem[] = []
    if (!(nominal > 0) || nominal === Infinity)
      found.push({ code: 'value-not-positive', detail: `${ref} is ${nominal}; it takes a value above zero.` })
    if (!(tolerance >= 0 && tolerance < 1))
      found.push({
        code: 'value-out-of-range',
        detail: `The tolerance of ${ref} is ${tolerance}; it takes a fraction from 0 to below 1, such as 0.01 for 1 %.`,
      })
    return found
  })
  const [first, ...more] = problems
  if (first) throw new ProblemError(first.code, first.detail, {}, more)
}
