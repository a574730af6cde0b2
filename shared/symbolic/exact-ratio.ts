import type { Polynomial } from './polynomial'
import { ONE, addScaled, commonMonomial, constant, divideExactly, equalPolynomials, multiply } from './polynomial'

/** A quotient of polynomials, and a bound for its degrees and for the length of its coefficients. */
export interface ExactRatio {
  above: Polynomial
  below: Polynomial
  weight: number
}

/** Raised when a formula is no quotient of polynomials, or one too large to be multiplied out. */
export class NotRational extends Error {}

const WEIGHT_MAX = 2000
/** Products of terms in one comparison. */
const WORK_MAX = 400_000

/** Arithmetic on exact ratios within a budget, so that any formula ends soon. */
export class RatioArithmetic {
  private work = 0
  /** @param reduce puts in what is known of the variables, such as the square of a root */
  constructor(private readonly reduce: (p: Polynomial) => Polynomial) {}

  times(a: Polynomial, b: Polynomial): Polynomial {
    this.work += a.size * b.size
    if (this.work > WORK_MAX) throw new NotRational('too many terms')
    return this.reduce(multiply(a, b))
  }

  product(a: ExactRatio, b: ExactRatio): ExactRatio {
    return this.tidy(a, b, () => [this.times(a.above, b.above), this.times(a.below, b.below)])
  }

  sum(a: ExactRatio, b: ExactRatio, sign: 1n | -1n = 1n): ExactRatio {
    return this.tidy(a, b, () =>
      equalPolynomials(a.below, b.below)
        ? [addScaled(a.above, b.above, sign), a.below]
        : [addScaled(this.times(a.above, b.below), this.times(b.above, a.below), sign), this.times(a.below, b.below)],
    )
  }

  power(a: ExactRatio, exponent: number): ExactRatio {
    const base = exponent < 0 ? inverse(a) : a
    let result: ExactRatio = { above: ONE, below: ONE, weight: 0 }
    for (let k = 0; k < Math.abs(exponent); k++) result = this.product(result, base)
    return result
  }

  private tidy(a: ExactRatio, b: ExactRatio, work: () => [Polynomial, Polynomial]): ExactRatio {
    const weight = a.weight + b.weight
    if (weight > WEIGHT_MAX) throw new NotRational('too long')
    const [above, below] = work()
    if (below.size === 0) throw new NotRational('division by zero')
    const common = new Map([[commonMonomial(new Map([...above, ...below])), 1n]])
    return { above: divideExactly(above, common)!, below: divideExactly(below, common)!, weight }
  }
}

/** @throws {NotRational} for 1/0 */
export function inverse({ above, below, weight }: ExactRatio): ExactRatio {
  if (above.size === 0) throw new NotRational('division by zero')
  return { above: below, below: above, weight }
}

export const negative = (a: ExactRatio): ExactRatio => ({ ...a, above: addScaled(new Map(), a.above, -1n) })

/** A number as the decimal that it is written as. */
export function exactNumber(value: number): ExactRatio {
  const found = /^(\d+)(?:\.(\d+))?(?:e([+-]\d+))?$/.exec(String(value))
  if (!found) throw new NotRational('no number')
  const [, head = '', tail = '', exponent = '0'] = found
  const power = Number(exponent) - tail.length
  const scale = 10n ** BigInt(Math.abs(power))
  const digits = BigInt(head + tail)
  const [above, below] = power < 0 ? [digits, scale] : [digits * scale, 1n]
  return {
    above: constant(above),
    below: constant(below),
    weight: 1 + Math.ceil((head.length + tail.length + Math.abs(power)) / 4),
  }
}
