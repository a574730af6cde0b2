import fc from 'fast-check'
import { afterAll, describe, expect, it } from 'vitest'
import { compileFormula, evaluateOnce } from '#shared/formula/compile'
import type { FormulaKind } from '#shared/formula/parse'
import { parseFormula } from '#shared/formula/parse'
import { formulaTex } from '#shared/formula/tex'
import { formulaOf, refusalOf } from '../../support/formulas'
import { HARMLESS_FORMULAS, HOSTILE_FORMULAS } from '../../support/hostile-formulas'

const KINDS: FormulaKind[] = ['value', 'condition', 'response']
const TEXTS = Object.entries(HOSTILE_FORMULAS).flatMap(([way, texts]) => texts.map((text) => ({ way, text })))
const within = <T>(milliseconds: number, run: () => T): T => {
  const start = performance.now()
  const result = run()
  expect(performance.now() - start).toBeLessThan(milliseconds)
  return result
}

describe('hostile formulas', () => {
  const globalsBefore = Object.getOwnPropertyNames(globalThis).sort()
  const prototypeBefore = Object.getOwnPropertyNames(Object.prototype).sort()

  afterAll(() => {
    expect(Object.getOwnPropertyNames(globalThis).sort()).toEqual(globalsBefore)
    expect(Object.getOwnPropertyNames(Object.prototype).sort()).toEqual(prototypeBefore)
  })

  it('are at least 150 different ones', () =>
    expect(new Set(TEXTS.map((one) => one.text)).size).toBeGreaterThanOrEqual(150))

  it.each(TEXTS)('are refused with line and column: $way: $text', ({ text }) => {
    for (const kind of KINDS) {
      const problem = within(500, () => refusalOf(text, kind))
      expect(problem.code).toBe('formula-not-read')
      expect(problem.line).toBeGreaterThanOrEqual(1)
      expect(problem.column).toBeGreaterThanOrEqual(1)
      expect(problem.column).toBeLessThanOrEqual(text.length + 1)
      expect(problem.detail).toMatch(/^.{5,300}\.$/su)
      expect(problem.detail).not.toMatch(/\p{C}/u)
    }
  })

  it('never raise, whatever stands beside what', () => {
    const piece = fc.constantFrom(...'a and or not ( ) , + - * / ^ < <= == != 2 4k7 s par sqrt GBW U1 pi'.split(' '))
    fc.assert(
      fc.property(fc.array(piece, { maxLength: 12 }), (pieces) => {
        for (const kind of KINDS) {
          const reading = parseFormula(pieces.join(' '), { kind })
          if (reading.ok) expect(formulaTex(reading.value)).not.toBe('')
          else expect(reading.problems[0]).toMatchObject({ code: 'formula-not-read', line: 1 })
        }
      }),
      { numRuns: 3000, seed: 3 },
    )
  })

  it.each(HARMLESS_FORMULAS)('are evaluated as plain numbers where they are legal: %s', (text, values, wanted) => {
    expect(within(500, () => evaluateOnce(formulaOf(text), values))).toBe(wanted)
    expect(formulaTex(formulaOf(text))).not.toBe('')
  })

  it.each(['__proto__', 'constructor', 'prototype', 'toString', 'hasOwnProperty', 'valueOf'])(
    'find nothing behind a vector without %s',
    (name) => {
      const reading = parseFormula(name, { kind: 'value' })
      if (!reading.ok) return expect(reading.problems[0].column).toBe(1)
      expect(() => compileFormula(reading.value, ['a'])).toThrow(/is not a part/)
      expect(() => evaluateOnce(reading.value, {})).toThrow(/is not a part/)
    },
  )
})

describe('formulas beyond any size', () => {
  it.each([
    ['a megabyte', '1+'.repeat(500_000) + '1'],
    ['a megabyte of blanks', ' '.repeat(1_000_000)],
    ['a megabyte of one name', 'a'.repeat(1_000_000)],
    ['a megabyte of digits', '9'.repeat(1_000_000)],
    ['a hundred thousand parentheses', '('.repeat(100_000)],
    ['a hundred thousand closed ones', '('.repeat(100_000) + '1' + ')'.repeat(100_000)],
    ['a thousand parentheses', '('.repeat(999) + '1' + ')'.repeat(999)],
    ['fifty-one parentheses', '('.repeat(51) + '1' + ')'.repeat(51)],
    ['calls in calls', 'sqrt('.repeat(60) + '1' + ')'.repeat(60)],
    ['a thousand signs', '-'.repeat(1000) + '1'],
    ['a thousand terms', '1+'.repeat(999) + '1'],
    ['seventeen arguments', `par(${'1,'.repeat(16)}1)`],
    ['two thousand digits', '9'.repeat(2000)],
    ['a long exponent', `1e${'9'.repeat(1900)}`],
  ])('are refused at once: %s', (_, text) => {
    for (const kind of KINDS)
      expect(within(500, () => refusalOf(text, kind))).toMatchObject({ code: 'formula-not-read', line: 1 })
  })

  it.each([
    ['fifty parentheses', '('.repeat(50) + '1' + ')'.repeat(50), 1],
    ['five hundred signs', '-'.repeat(500) + '1', 1],
    ['a tower of powers', '1^'.repeat(299) + '1', 1],
    ['three hundred terms', '1+'.repeat(299) + '1', 300],
    ['sixteen arguments', `par(${'1,'.repeat(15)}1)`, 1 / 16],
    ['a name of two thousand letters', 'a'.repeat(2000), 7],
  ])('are read in time up to the bounds: %s', (_, text, wanted) => {
    const got = within(500, () => evaluateOnce(formulaOf(text), { ['a'.repeat(2000)]: 7 }))
    expect(got).toBe(wanted)
    expect(formulaTex(formulaOf(text)).length).toBeLessThan(20_000)
  })

  it.each(['1+', 'a*', '(', ' ', '-', '4k7+', '1 kHz+', '“', 'sqrt(', 'a,', '1 m', '_', '9', 'not '])(
    'are read in time that grows no faster than the length: %s',
    (piece) => {
      // The least of several runs, so that a busy machine does not count.
      const least = (characters: number) => {
        const text = piece.repeat(Math.ceil(characters / piece.length)).slice(0, characters)
        const runs = Array.from({ length: 7 }, () => {
          const start = performance.now()
          for (let k = 0; k < 10; k++) parseFormula(text, { kind: 'value' })
          return performance.now() - start
        })
        return Math.min(...runs)
      }
      least(2000)
      expect(least(2000)).toBeLessThan(15 * least(200) + 2)
      expect(least(100_000)).toBeLessThan(15 * least(10_000) + 2)
    },
  )
})
