import { describe, expect, it } from 'vitest'
import { compileComplexFormula } from '#shared/formula/compile-complex'
import { formulaOf } from '../../support/formulas'

const at = (text: string, values: Record<string, number>, sRe: number, sIm: number): number[] => {
  const out = new Float64Array(2)
  compileComplexFormula(formulaOf(text, 'response'), Object.keys(values))(
    Float64Array.from(Object.values(values)),
    sRe,
    sIm,
    out,
  )
  return [...out]
}
const close = { relative: 1e-12, absolute: 1e-12 }

describe('a response', () => {
  // By hand: 1/(1 + j) = (1 − j)/2; (3 + 4j)² = −7 + 24j; √(3 + 4j) = 2 + j; e^{jπ/2} = j.
  it.each([
    ['1/(1 + s*R)', { R: 1 }, 0, 1, [0.5, -0.5]],
    ['s^2', {}, 3, 4, [-7, 24]],
    ['s^-1', {}, 3, 4, [0.12, -0.16]],
    ['s^0', {}, 3, 4, [1, 0]],
    ['s^3', {}, 0, 2, [0, -8]],
    ['sqrt(s)', {}, 3, 4, [2, 1]],
    ['sqrt(s)', {}, -3, 4, [1, 2]],
    ['sqrt(s)', {}, -3, -4, [1, -2]],
    ['sqrt(s)', {}, -4, 0, [0, 2]],
    ['sqrt(s)', {}, 0, 0, [0, 0]],
    ['exp(s)', {}, 0, Math.PI / 2, [0, 1]],
    ['par(R, s)', { R: 2 }, 0, 2, [1, 1]],
    ['ser(R, s, 1)', { R: 2 }, 0, 2, [3, 2]],
    ['-(s - R)*(s + R)', { R: 1 }, 0, 2, [5, 0]],
    ['pi*s', {}, 1, 0, [Math.PI, 0]],
    ['(1 + s)/(1 - s)', {}, 0, 1, [0, 1]],
  ])('%s', (text, values, sRe, sIm, wanted) => {
    expect(at(text, values, sRe, sIm)).toAgreeWith(wanted, close)
  })

  it('is −3.01 dB and −45° beyond its sign at the corner of a first-order low-pass', () => {
    const [re, im] = at('-(Rf/Ri)/(1 + s*Rf*Cf)', { Rf: 20e3, Ri: 10e3, Cf: 1e-9 }, 0, 1 / (20e3 * 1e-9)) as [
      number,
      number,
    ]
    expect(Math.hypot(re, im)).toAgreeWith(2 / Math.SQRT2, close)
    expect((Math.atan2(im, re) * 180) / Math.PI).toAgreeWith(135, close)
  })

  it('takes a capacitor at 0 Hz as an open circuit', () => {
    expect(at('par(R, 1/(s*C))', { R: 1e3, C: 1e-9 }, 0, 0)).toAgreeWith([1e3, 0], close)
    expect(at('R/(R + 1/(s*C))', { R: 1e3, C: 1e-9 }, 0, 0)).toAgreeWith([0, 0], close)
  })

  it('divides the very large and the very small without losing them', () => {
    expect(at('s/(s + s)', {}, 0, 1e200)).toAgreeWith([0.5, 0], close)
    expect(at('s/(s + s)', {}, 1e-200, 1e-200)).toAgreeWith([0.5, 0], close)
  })

  it('gives the same however often and in whatever order it is called', () => {
    const run = compileComplexFormula(formulaOf('1/(1 + s*R + s^2*R)', 'response'), ['R'])
    const out = new Float64Array(2)
    const once = (sIm: number) => (run(Float64Array.of(2), 0, sIm, out), [...out])
    const first = [0, 1, 10].map(once)
    expect([10, 1, 0].map(once).reverse()).toEqual(first)
  })

  it('names what it does not know with its column', () => {
    expect(() => compileComplexFormula(formulaOf('1/(1 + s*Rff)', 'response'), ['Rf'])).toThrow(
      /“Rff”.*Did you mean Rf/,
    )
  })
})
