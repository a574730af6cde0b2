import { describe, expect, it } from 'vitest'
import { evaluateOnce } from '#shared/formula/compile'
import { parseFormula } from '#shared/formula/parse'
import { formulaOf, refusalOf } from '../../support/formulas'

const value = (text: string, values: Record<string, number> = {}) => evaluateOnce(formulaOf(text), values)

describe('quantities in a formula', () => {
  // Values by the SI brochure's prefixes and the letter codes of IEC 60062.
  it.each([
    ['30k', 30e3],
    ['2.4 kHz', 2400],
    ['2.4kHz', 2400],
    ['4k7', 4700],
    ['100 nF', 1e-7],
    ['100nF', 1e-7],
    ['30 kΩ', 30e3],
    ['30 k\u2126', 30e3],
    ['30 kohm', 30e3],
    ['1.5n', 1.5e-9],
    ['1n5', 1.5e-9],
    ['1µ5', 1.5e-6],
    ['0.1 µF', 1e-7],
    ['0.1 μF', 1e-7],
    ['0.1 uF', 1e-7],
    ['10meg', 1e7],
    ['10 meg', 1e7],
    ['2M2', 2.2e6],
    ['10R', 10],
    ['4R7', 4.7],
    ['0R22', 0.22],
    ['3V3', 3.3],
    ['5 m', 5e-3],
    ['25 ppm', 25e-6],
    ['5 %', 0.05],
    ['1%', 0.01],
    ['5 V/µs', 5e6],
    ['5 V/us', 5e6],
    ['5 V/s', 5],
    ['8 nV/√Hz', 8e-9],
    ['2 krad/s', 2000],
    ['1e-9', 1e-9],
    ['1E3', 1000],
    ['1e3k', 1e6],
    ['.5', 0.5],
    ['5.', 5],
    ['0', 0],
    ['0 V', 0],
    ['0 F', 0],
    ['300 K', 300],
    ['300K', 300e3],
  ])('reads %s', (text, wanted) => expect(value(text)).toBe(wanted))

  it.each([
    ['1/30k', 1 / 30e3],
    ['1/(2*pi*f_c*30k)', 1 / (2 * Math.PI * 2400 * 30e3)],
    ['2^1k', 2 ** 1000],
    ['30k^2', 9e8],
    ['-4k7', -4700],
    ['1/2 kHz', 1 / 2000],
    ['6/2k*3', 9e-3],
  ])('keeps the literal in %s together', (text, wanted) => {
    expect(value(text, { f_c: 2400 })).toAgreeWith(wanted, { relative: 1e-15 })
  })

  it('takes 30k as a number even where a part is named k', () => expect(value('30k + k', { k: 1 })).toBe(30001))

  it.each([
    ['6 dB', 1, /level/],
    ['dB(K) > 6 dB', 9, /level/],
    ['25 °C', 1, /kelvin/],
    ['45 °', 1, /radians/],
    ['2pi', 1, /write 2\*pi/],
    ['3Rf', 1, /write 3\*Rf/],
    ['2kHzx', 1, /not a value/],
    ['1_000', 1, /not a value/],
    ['0x10', 1, /not a value/],
    ['1.2.3', 1, /not a value/],
    ['4.7k3', 1, /could not be read/],
    ['1e400', 1, /too large/],
    ['1e-400', 1, /too small/],
    ['1,000', 2, /decimal mark is a point/],
    ['Rf + 1,5', 7, /decimal mark is a point/],
  ])('refuses %s with a sentence', (text, column, sentence) => {
    const problem = refusalOf(text, text.includes('>') ? 'condition' : 'value')
    expect(problem).toMatchObject({ code: 'formula-not-read', line: 1, column })
    expect(problem.detail).toMatch(sentence)
  })

  it('refuses seconds in a response, where s is the variable', () => {
    expect(refusalOf('1/(1 + 2s)', 'response')).toMatchObject({ column: 8, detail: '2s would be seconds. Write 2*s.' })
    expect(refusalOf('1/(1 + 2 s)', 'response').column).toBe(8)
    expect(parseFormula('1/(1 + s*2 ms)', { kind: 'response' }).ok).toBe(true)
  })
})

describe('operators', () => {
  // By the usual order of operations; a sign binds less than a power.
  it.each([
    ['-2^2', -4],
    ['(-2)^2', 4],
    ['2^3^2', 512],
    ['2^-1', 0.5],
    ['8/4/2', 1],
    ['8-4-2', 2],
    ['2*-3', -6],
    ['2--3', 5],
    ['+3', 3],
    ['-(2 + 3)*2', -10],
    ['2 + 3*4^2/8', 8],
  ])('%s is %d', (text, wanted) => expect(value(text)).toBe(wanted))

  it.each([
    ['2 pi', 3, /missing between “2” and “pi”.*2\*pi/],
    ['Rf Cf', 4, /Rf\*Cf/],
    ['(a)(b)', 4, /missing/],
    ['2(a)', 2, /missing/],
    ['(a)2', 4, /missing/],
    ['Rf(1 + K)', 3, /no function Rf.*Rf\*\(/],
    ['sqrt(2)(3)', 8, /missing/],
  ])('refuses the product without a sign in %s', (text, column, sentence) => {
    const problem = refusalOf(text)
    expect(problem.column).toBe(column)
    expect(problem.detail).toMatch(sentence)
  })

  it.each([
    ['1/(2*)', 6],
    ['a ** b', 4],
    ['par(a,,b)', 7],
    ['2^^3', 3],
    ['()', 2],
    ['+', 1],
    ['a -', 3],
    ['(a', 3],
    ['a)', 2],
    ['', 1],
    ['   ', 1],
  ])('says where %s stops making sense', (text, column) => expect(refusalOf(text).column).toBe(column))

  it('counts lines in a formula of several', () => {
    expect(refusalOf('1/(2*pi*\n  Rf*\n   *Cf)')).toMatchObject({ line: 3, column: 4 })
    expect(refusalOf('Rf\r\n  + $')).toMatchObject({ line: 2, column: 5 })
    expect(value('Rf\n  *2', { Rf: 3 })).toBe(6)
  })
})

describe('names', () => {
  it('lists the names that are not constants', () => {
    expect([...formulaOf('Rf*pi + f_c*k_B*30k').names]).toEqual(['Rf', 'f_c'])
    expect([...formulaOf('s*Rf', 'response').names]).toEqual(['Rf'])
    expect([...formulaOf('s*Rf').names]).toEqual(['s', 'Rf'])
  })

  it('takes Greek letters, digits and underscores', () =>
    expect(value('τ_1*ω0 + Z_in', { τ_1: 2, ω0: 3, Z_in: 4 })).toBe(10))

  it.each(['true', 'NaN', 'Infinity', 'in', 'mod', 'xor', 'end'])('keeps %s out', (word) =>
    expect(refusalOf(`2*${word}`)).toMatchObject({ column: 3, detail: `“${word}” cannot be used as a name.` }),
  )
})

describe('conditions', () => {
  it('are comparisons joined by and, or, not', () => {
    expect(formulaOf('f_c > 200 kHz and not (K < -40 or Q == 2)', 'condition').names.size).toBe(3)
  })

  it.each([
    ['a and b', 1, /compares/],
    ['a', 1, /compares/],
    ['a < b < c', 1, /two values at a time/],
    ['not a > b', 5, /not \(a > b\)/],
    ['(a > b) + 1', 2, /compares/],
    ['(a > b) > c', 2, /no value/],
    ['sqrt(a > b) > 1', 6, /no value/],
    ['a = b', 3, /Write ==/],
    ['a ≥ b', 3, /Write >=/],
    ['a & b', 3, /Write and/],
    ['a <> b', 4, /not complete/],
  ])('refuse %s', (text, column, sentence) => {
    const problem = refusalOf(text, 'condition')
    expect(problem.column).toBe(column)
    expect(problem.detail).toMatch(sentence)
  })

  it.each(['a > b', 'not a', 'a and b', '1 + (a == b)', 'min(a, b > c)'])('are no values: %s', (text) =>
    expect(refusalOf(text).detail).toMatch(/comparison is no value/),
  )
})

describe('functions', () => {
  it.each([
    ['sqrt()', 'value', 1],
    ['sqrt', 'value', 1],
    ['sqrt(a, b)', 'value', 1],
    ['par(a)', 'value', 1],
    ['2*atan2(a)', 'value', 3],
    ['foo(a)', 'value', 4],
    ['pi(a)', 'value', 3],
    ['1 + abs(s)', 'response', 5],
    ['1 + s^0.5', 'response', 7],
    ['s^n', 'response', 3],
    ['s^21', 'response', 3],
    ['GBW(U1)*s', 'response', 1],
  ] as const)('refuses %s', (text, kind, column) => expect(refusalOf(text, kind).column).toBe(column))

  it('takes op-amp data with a designator alone', () => {
    expect(formulaOf('f_c > GBW(U1)/100', 'condition').opampData).toEqual([{ datum: 'GBW', ref: 'U1' }])
    for (const text of ['GBW(2)', 'GBW(R1)', 'GBW(U1, U2)', 'GBW(U1 + 1)', 'GBW(GBW(U1))', 'GBW()'])
      expect(refusalOf(text)).toMatchObject({ line: 1 })
  })

  it('reports every problem of the tree at once', () => {
    const reading = parseFormula('sqrt(a, b) + par(c)', { kind: 'value' })
    expect(reading.ok ? [] : reading.problems.map((one) => one.column)).toEqual([1, 14])
  })
})
