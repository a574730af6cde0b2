/**
 * Whole numbers modulo a prime below 2²⁶, in which elimination is exact. Decimal values map into it without rounding,
 * so that "singular", "degree" and "common factor" are decided, not guessed from small numbers. A nonzero number is
 * taken for zero with a chance of one in 2²⁶; two primes together make that 2⁻⁵².
 */
export interface Field {
  prime: number
}

/** The two largest primes below 2²⁶. */
export const FIELDS: readonly [Field, Field] = [{ prime: 67108859 }, { prime: 67108837 }]

export function multiply(a: number, b: number, { prime }: Field): number {
  const product = a * b
  const rest = product - Math.floor(product / prime) * prime
  return rest < 0 ? rest + prime : rest >= prime ? rest - prime : rest
}

export function power(base: number, exponent: number, field: Field): number {
  let result = 1
  for (let square = base, e = exponent; e > 0; e = Math.floor(e / 2), square = multiply(square, square, field))
    if (e % 2 === 1) result = multiply(result, square, field)
  return result
}

export const invert = (a: number, field: Field) => power(a, field.prime - 2, field)

/** A double as the decimal number that it is written as: 4.7e-9 is exactly 47/10¹⁰. */
export function residue(value: number, field: Field): number {
  const { prime } = field
  if (Number.isInteger(value) && Math.abs(value) < prime) return value < 0 ? value + prime : value
  const [mantissa, exponent] = Math.abs(value).toExponential().split('e') as [string, string]
  const digits = mantissa.replace('.', '')
  let whole = 0
  for (const digit of digits) whole = (whole * 10 + Number(digit)) % prime
  const shift = Number(exponent) - (digits.length - 1)
  const scale = power(10, Math.abs(shift), field)
  const found = multiply(whole, shift < 0 ? invert(scale, field) : scale, field)
  return value < 0 && found > 0 ? prime - found : found
}

/**
 * Determinant of a square matrix of residues, which is eliminated in place; row-major.
 * @returns the determinant, and the first column found to depend on those before it (−1 when there is none)
 */
export function eliminate(matrix: Float64Array, size: number, field: Field): { determinant: number; column: number } {
  const { prime } = field
  let determinant = 1
  for (let k = 0; k < size; k++) {
    let pivot = k
    while (pivot < size && matrix[pivot * size + k] === 0) pivot++
    if (pivot === size) return { determinant: 0, column: k }
    if (pivot !== k) {
      determinant = determinant === 0 ? 0 : prime - determinant
      for (let j = k; j < size; j++) {
        const kept = matrix[k * size + j]!
        matrix[k * size + j] = matrix[pivot * size + j]!
        matrix[pivot * size + j] = kept
      }
    }
    const value = matrix[k * size + k]!
    determinant = multiply(determinant, value, field)
    let inverse = 0
    for (let i = k + 1; i < size; i++) {
      const below = matrix[i * size + k]!
      if (below === 0) continue
      inverse ||= invert(value, field)
      const factor = multiply(below, inverse, field)
      for (let j = k; j < size; j++) {
        const above = matrix[k * size + j]!
        if (above === 0) continue
        const rest = matrix[i * size + j]! - multiply(factor, above, field)
        matrix[i * size + j] = rest < 0 ? rest + prime : rest
      }
    }
  }
  return { determinant, column: -1 }
}

/** Polynomial through the values at 1, 2, 3 …; ascending powers, as many coefficients as values. */
export function interpolate(values: readonly number[], field: Field): number[] {
  const { prime } = field
  const n = values.length
  const divided = [...values]
  for (let order = 1; order < n; order++)
    for (let i = n - 1; i >= order; i--) {
      const difference = (divided[i]! - divided[i - 1]! + prime) % prime
      divided[i] = multiply(difference, invert(order, field), field)
    }
  const result = new Array<number>(n).fill(0)
  for (let i = n - 1; i >= 0; i--) {
    for (let k = n - 1; k >= 0; k--) {
      const shifted = k > 0 ? result[k - 1]! : 0
      result[k] = (shifted + prime - multiply(result[k]!, i + 1, field)) % prime
    }
    result[0] = (result[0]! + divided[i]!) % prime
  }
  return result
}

/** Degree of the greatest common divisor of two polynomials; ascending powers, neither zero. */
export function commonDegree(a: readonly number[], b: readonly number[], field: Field): number {
  let high = trimmed(a)
  let low = trimmed(b)
  if (high.length < low.length) [high, low] = [low, high]
  while (low.length > 0) {
    const inverse = invert(low[low.length - 1]!, field)
    while (high.length >= low.length) {
      const factor = multiply(high[high.length - 1]!, inverse, field)
      const shift = high.length - low.length
      low.forEach((c, k) => {
        high[k + shift] = (high[k + shift]! + field.prime - multiply(factor, c, field)) % field.prime
      })
      high = trimmed(high)
      if (high.length === 0) break
    }
    ;[high, low] = [low, high]
  }
  return high.length - 1
}

function trimmed(a: readonly number[]): number[] {
  const kept = [...a]
  while (kept.length && kept[kept.length - 1] === 0) kept.pop()
  return kept
}
