import type { Problem } from '../problems'
import { ProblemError } from '../problems'

/**
 * Refuses quantities that are not above zero and finite, all at once.
 * @throws {ProblemError} 'value-not-positive' naming each
 * @example requirePositive({ resistanceOhm, tempKelvin })
 */
export function requirePositive(quantities: Readonly<Record<string, number>>): void {
  const problems = Object.entries(quantities).flatMap(([name, value]): Problem[] =>
    value > 0 && Number.isFinite(value)
      ? []
      : [{ code: 'value-not-positive', detail: `${name} is ${value}; it takes a number above zero.` }],
  )
  const [first, ...more] = problems
  if (first) throw new ProblemError(first.code, first.detail, {}, more)
}
