import { seededRandom } from '../numerics/random'
import { ProblemError } from '../problems'
import type { Spread } from './spread'

/** Uniform within the tolerance; or normal with tolerance = 3σ, what lies beyond being thrown away. */
export const DISTRIBUTIONS = ['uniform', 'normal'] as const
export type Distribution = (typeof DISTRIBUTIONS)[number]

export const BUILDS_DEFAULT = 10_000
export const BUILDS_MOST = 1_000_000
export const SEED_MOST = 4294967295

/** What decides the draws; every sentence about yield names all three. */
export interface Draws {
  distribution: Distribution
  builds: number
  seed: number
}

const CUT_SIGMA = 3

/**
 * Draws one build after the other: each designator on its own, in their order.
 * @returns fills its argument with values in ohm, farad, henry
 * Source of the normal draws: G. E. P. Box, M. E. Muller, Ann. Math. Stat. 29 (1958) 610.
 */
export function buildDrawer(
  spreads: readonly Spread[],
  distribution: Distribution,
  seed: number,
): (values: Float64Array) => void {
  const random = seededRandom(seed)
  const fraction = distribution === 'uniform' ? () => 2 * random() - 1 : () => cutNormal(random)
  const nominal = Float64Array.from(spreads, (one) => one.nominal)
  const width = Float64Array.from(spreads, (one) => one.nominal * one.tolerance)
  return (values) => {
    for (let p = 0; p < nominal.length; p++) values[p] = nominal[p]! + width[p]! * fraction()
  }
}

/** Within −1 … 1, σ being a third. */
function cutNormal(random: () => number): number {
  for (;;) {
    const z = Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random())
    if (Math.abs(z) <= CUT_SIGMA) return z / CUT_SIGMA
  }
}

/**
 * Completes and checks what decides the draws: 10 000 builds, uniform, when left out.
 * @throws {ProblemError} 'value-out-of-range'
 */
export function requireDraws({
  distribution = 'uniform',
  builds = BUILDS_DEFAULT,
  seed,
}: Partial<Draws> & { seed: number }): Draws {
  if (!Number.isInteger(builds) || builds < 1 || builds > BUILDS_MOST)
    throw new ProblemError('value-out-of-range', `${builds} builds; it takes a whole number from 1 to ${BUILDS_MOST}.`)
  if (!Number.isInteger(seed) || seed < 0 || seed > SEED_MOST)
    throw new ProblemError('value-out-of-range', `The seed is ${seed}; it takes a whole number from 0 to ${SEED_MOST}.`)
  return { distribution, builds, seed }
}
