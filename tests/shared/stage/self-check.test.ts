import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { SelfCheck } from '#shared/contracts/compute'
import { readBlock } from '#shared/page-source/read-block'
import { valueOf } from '#shared/problems'
import { defaultValues, seededSets, selfCheck } from '#shared/stage/index'

const source = (code: string) => readFileSync(`content-seed/${code}.md`, 'utf8')

/** The self-check of a house block with one thing in its text made another. */
function checkWith(code: string, from: string, to: string): SelfCheck {
  const text = source(code)
  expect(text).toContain(from)
  const { stage } = valueOf(readBlock(text.replace(from, to)))
  return selfCheck(stage, defaultValues(stage))
}
const outcomeOf = (check: SelfCheck, subject: string) => check.lines.find((line) => line.subject === subject)?.outcome

describe('a formula that is wrong', () => {
  it.each<[string, string, string, string, string]>([
    ['a missing 2π', 'lp1-inv', 'formula: 1/(2*pi*Rf*Cf), unit', 'formula: 1/(Rf*Cf), unit', 'f_c'],
    ['a swapped part', 'lp1-inv', 'formula: 1/(2*pi*Rf*Cf), unit', 'formula: 1/(2*pi*Ri*Cf), unit', 'f_c'],
    ['a wrong sign', 'lp1-inv', 'formula: -Rf/Ri, meaning', 'formula: Rf/Ri, meaning', 'K'],
    ['a ratio upside down', 'lp1-inv', 'formula: -Rf/Ri, meaning', 'formula: -Ri/Rf, meaning', 'K'],
    [
      'one that is right only at equal resistors',
      'lp2-sku',
      'formula: sqrt(R1*R2*C1*C2)/(C2*(R1 + R2))',
      'formula: sqrt(C1/C2)/2',
      'Q',
    ],
    [
      'one that is right only at equal resistors, off by their mean',
      'lp2-sku',
      'formula: 1/(2*pi*sqrt(R1*R2*C1*C2))',
      'formula: 1/(pi*(R1 + R2)*sqrt(C1*C2))',
      'f_0',
    ],
    ['a factor of 1 + 1e-5', 'hp1-inv', 'formula: 1/(2*pi*Ri*Ci), unit', 'formula: 1.00001/(2*pi*Ri*Ci), unit', 'f_c'],
    ['a response of the wrong sign', 'lp1-inv', 'response: -(Rf', 'response: (Rf', 'response'],
    ['a response without its pole', 'lp1-inv', 'response: -(Rf/Ri)/(1 + s*Rf*Cf)', 'response: -(Rf/Ri)', 'response'],
    [
      'a response with 2π too many',
      'hp1-inv',
      'response: -s*Rf*Ci/(1 + s*Ri*Ci)',
      'response: -s*Rf*Ci/(1 + 2*pi*s*Ri*Ci)',
      'response',
    ],
    ['a pole pair taken for two poles', 'lp2-mfb', 'is: quality factor', 'is: peak gain', 'Q'],
  ])('is found: %s', (_, code, from, to, subject) => {
    const check = checkWith(code, from, to)
    expect(check.outcome).toBe('differs')
    expect(outcomeOf(check, subject)).toBe('differs')
    expect(check.worstRelativeDifference).toBeGreaterThan(1e-6)
  })

  it('is found though the values shown happen to fit', () => {
    const text = source('lp2-sku')
      .replace('R1: { default: 7.68k', 'R1: { default: 10k')
      .replace('R2: { default: 15k', 'R2: { default: 10k')
      .replace('formula: sqrt(R1*R2*C1*C2)/(C2*(R1 + R2))', 'formula: sqrt(C1/C2)/2')
    const { stage } = valueOf(readBlock(text))
    const check = selfCheck(stage, defaultValues(stage))
    expect(outcomeOf(check, 'Q')).toBe('differs')
    expect(check.lines.find((line) => line.subject === 'Q')!.detail).toContain('a seeded set')
  })
})

describe('a formula that is approximate by design', () => {
  const exact = 'formula: 1/(2*pi*Rf*Cf), unit: Hz, meaning: cut-off frequency, is: half-power frequency'
  const with3 = (more: string) => exact.replace('1/(2*pi*Rf*Cf)', '0.159/(Rf*Cf)') + more

  it('agrees inside its own bound and tells the worst difference', () => {
    // 0.159 for 1/(2π) = 0.15915: 0.097 % low.
    const check = checkWith('lp1-inv', exact, with3(', approximately: 0.1 %'))
    expect(check.outcome).toBe('agrees')
    expect(check.lines.find((line) => line.subject === 'f_c')!.worstRelativeDifference).toBeCloseTo(9.735e-4, 6)
  })

  it('differs beyond it', () => {
    expect(checkWith('lp1-inv', exact, with3(', approximately: 0.09 %')).outcome).toBe('differs')
    expect(checkWith('lp1-inv', exact, with3('')).outcome).toBe('differs')
  })

  it('is held to it only where it claims to hold', () => {
    const check = checkWith('lp1-inv', exact, with3(', approximately: 0.01 %, when: Rf > 1 GΩ'))
    expect(outcomeOf(check, 'f_c')).toBe('not checked')
  })
})

describe('what cannot be compared', () => {
  it('is not checked, never agreement', () => {
    const check = checkWith('lp1-inv', ', is: input impedance at 0 Hz', '')
    expect(outcomeOf(check, 'Z_in')).toBe('not checked')
    const bare = source('lp1-inv')
      .replace(/response: .*\n/, '')
      .replace(':formula[response]', '')
      .replace(/, is: [^}]*\}/g, ' }')
    const { stage } = valueOf(readBlock(bare))
    const none = selfCheck(stage, defaultValues(stage))
    expect(none.outcome).toBe('not checked')
    expect(none.worstRelativeDifference).toBeNull()
    expect(none.lines.every((line) => line.outcome === 'not checked' && line.detail.endsWith('.'))).toBe(true)
  })
})

describe('the seeded sets', () => {
  const { stage } = valueOf(readBlock(source('lp2-mfb')))

  it('are fifty, the same every time, inside the ranges of the parts', () => {
    const sets = seededSets(stage)
    expect(sets).toHaveLength(50)
    expect(seededSets(stage)).toEqual(sets)
    for (const part of stage.parts)
      for (const set of sets) {
        expect(set[part.name]).toBeGreaterThanOrEqual(part.from)
        expect(set[part.name]).toBeLessThanOrEqual(part.to)
      }
  })

  it('spread over the decades of each part', () => {
    for (const part of stage.parts) {
      const values = seededSets(stage).map((set) => Math.log10(set[part.name]! / part.from))
      expect(Math.max(...values) - Math.min(...values)).toBeGreaterThan(0.8 * Math.log10(part.to / part.from))
    }
  })
})
