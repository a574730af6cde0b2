import { describe, expect, it } from 'vitest'
import type { Dimension } from '#shared/formula/dimension'
import { DIMENSIONS, dimensionOf, dimensionWords, sameDimension } from '#shared/formula/dimension'
import type { Problem } from '#shared/problems'
import { valueOf } from '#shared/problems'
import { formulaOf } from '../../support/formulas'

const KNOWN: Record<string, Dimension> = {
  R: DIMENSIONS['Ω'],
  R1: DIMENSIONS['Ω'],
  C: DIMENSIONS.F,
  L: DIMENSIONS.H,
  f: DIMENSIONS.Hz,
  T: DIMENSIONS.K,
  V: DIMENSIONS.V,
  I: DIMENSIONS.A,
  K: DIMENSIONS[''],
  Q: DIMENSIONS[''],
}
const found = (text: string, kind: 'value' | 'response' | 'condition' = 'value') =>
  valueOf(dimensionOf(formulaOf(text, kind), KNOWN))
const refused = (text: string, kind: 'value' | 'response' | 'condition' = 'value'): Problem => {
  const reading = dimensionOf(formulaOf(text, kind), KNOWN)
  if (reading.ok) throw new Error(`${text} fits.`)
  return reading.problems[0]
}

describe('dimensions', () => {
  // Coherent SI: Ω = V/A, F = As/V, H = Vs/A (SI brochure, 9th edition, table 4).
  it.each([
    ['R*C', DIMENSIONS.s],
    ['L/R', DIMENSIONS.s],
    ['1/(2*pi*R*C)', DIMENSIONS.Hz],
    ['1/(2*pi*sqrt(R*R1*C*C))', DIMENSIONS.Hz],
    ['sqrt(L/C)', DIMENSIONS['Ω']],
    ['par(R, R1) + R', DIMENSIONS['Ω']],
    ['par(R, 1/(2*pi*f*C))', DIMENSIONS['Ω']],
    ['sqrt(4*k_B*T*R)', DIMENSIONS['V/√Hz']],
    ['sqrt(4*k_B*T/R)', DIMENSIONS['A/√Hz']],
    ['8 nV/√Hz*sqrt(f)', DIMENSIONS.V],
    ['R1/R', DIMENSIONS['']],
    ['atan2(R, R1)', DIMENSIONS['']],
    ['dB(R/R1)', DIMENSIONS['']],
    ['V*I', DIMENSIONS.W],
    ['R*2 mA', DIMENSIONS.V],
    ['R + 30 kΩ', DIMENSIONS['Ω']],
    ['R + 30k', DIMENSIONS['Ω']],
    ['R + 4k7', DIMENSIONS['Ω']],
    ['R + 0', DIMENSIONS['Ω']],
    ['max(f, 1 kHz)', DIMENSIONS.Hz],
    ['1 + 25 ppm', DIMENSIONS['']],
    ['(R^3)^(1/3) + R', DIMENSIONS['Ω']],
    ['R^(1/2)*R^0.5', DIMENSIONS['Ω']],
    ['R^0', DIMENSIONS['']],
    ['(R/R1)^K', DIMENSIONS['']],
    ['2^K', DIMENSIONS['']],
    ['GBW(U1)/f', DIMENSIONS['']],
    ['i_n(U1)*R - e_n(U1)', DIMENSIONS['V/√Hz']],
    ['abs(-R)', DIMENSIONS['Ω']],
  ])('%s', (text, wanted) => {
    expect(dimensionWords(found(text))).toBe(dimensionWords(wanted))
    expect(sameDimension(found(text), wanted)).toBe(true)
  })

  it.each(['30k', '0', '30k*C', '1/30k'])('lets %s be of any dimension', (text) => expect(found(text)).toBe('any'))

  it('gives s of a response the dimension of a frequency', () => {
    expect(found('-(R/R1)/(1 + s*R*C)', 'response')).toEqual(DIMENSIONS[''])
    expect(refused('1/(1 + s*R)', 'response').detail).toBe('This adds a plain number and a quantity in V·A^-1·s^-1.')
  })

  it.each([
    ['R + C', 5, 'This adds a resistance and a capacitance.'],
    ['1/(R - 1/(f*R))', 8, 'This subtracts a resistance and a capacitance.'],
    ['R + 1', 5, 'This adds a resistance and a plain number.'],
    ['par(R, C)', 8, 'This takes into par a resistance and a capacitance.'],
    ['min(f, R*C)', 8, 'This takes into min a frequency and a time.'],
    ['sin(f)', 5, 'sin takes a plain number; this is a frequency.'],
    ['2 + dB(R)', 8, 'dB takes a plain number; this is a resistance.'],
    ['2^R', 3, 'An exponent takes a plain number; this is a resistance.'],
    ['2^(2 Hz)', 4, 'An exponent takes a plain number; this is a frequency.'],
    ['R^K', 1, 'A power with a varying exponent takes a plain number; this is a resistance.'],
    ['R +\n  C', 3, 'This adds a resistance and a capacitance.'],
  ])('refuses %s', (text, column, detail) => {
    const problem = refused(text)
    expect(problem).toMatchObject({ code: 'formula-dimension', column, line: text.includes('\n') ? 2 : 1 })
    expect(problem.detail).toBe(detail)
  })

  it('holds both sides of a comparison together', () => {
    expect(found('f > 200 kHz and Q < 8 or R < 1k', 'condition')).toEqual(DIMENSIONS[''])
    expect(refused('f > 200', 'condition')).toMatchObject({
      column: 5,
      detail: 'This compares a frequency and a plain number.',
    })
    expect(refused('not (Q < 8 and R > 1 nF)', 'condition').column).toBe(20)
  })

  it('says dimensions in words', () => {
    expect(dimensionWords(DIMENSIONS.s)).toBe('a time')
    expect(dimensionWords(found('R*C*C'))).toBe('a quantity in V^-1·A·s^2')
    expect(dimensionWords('any')).toBe('a number of any unit')
  })

  it('takes time in proportion to a nest of powers', () => {
    let text = 'x'
    for (let k = 0; k < 49; k++) text = `(${text})^a`
    const start = performance.now()
    dimensionOf(formulaOf(text), {})
    dimensionOf(formulaOf(`${'2^'.repeat(290)}a`), {})
    expect(performance.now() - start).toBeLessThan(500)
  })

  it('knows no names but those it is given', () => {
    expect(valueOf(dimensionOf(formulaOf('toString + constructor'), {}))).toBe('any')
  })
})
