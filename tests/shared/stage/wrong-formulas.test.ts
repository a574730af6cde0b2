import { describe, expect, it } from 'vitest'
import { readBlock } from '#shared/page-source/read-block'
import { valueOf } from '#shared/problems'
import { defaultValues, readStage, selfCheck } from '#shared/stage/index'
import { evaluated, seedPage } from '../../support/stages'

function stageWith(code: string, from: string, to: string) {
  const text = seedPage(code)
  expect(text).toContain(from)
  return valueOf(readBlock(text.replace(from, () => to))).stage
}
const checkWith = (code: string, from: string, to: string) => {
  const stage = stageWith(code, from, to)
  return selfCheck(stage, defaultValues(stage))
}
const outcomes = (check: ReturnType<typeof selfCheck>) =>
  Object.fromEntries(check.lines.map((line) => [line.subject, line.outcome]))

const MFB_Q = 'sqrt(R2*R3*C1*C2)/(C2*(R2 + R3 + R2*R3/R1))'
const SKU_RESPONSE = 'response: 1/(1 + s*C2*(R1 + R2) + s^2*R1*R2*C1*C2)'

describe('a formula made wrong on purpose differs', () => {
  it.each<[string, string, string, string, string]>([
    ['a Q upside down', 'lp2-mfb', MFB_Q, '(C2*(R2 + R3 + R2*R3/R1))/sqrt(R2*R3*C1*C2)', 'Q'],
    ['a Q without one term', 'lp2-mfb', MFB_Q, 'sqrt(R2*R3*C1*C2)/(C2*(R2 + R3))', 'Q'],
    ['a Q with capacitors swapped', 'lp2-mfb', MFB_Q, 'sqrt(R2*R3*C1*C2)/(C1*(R2 + R3 + R2*R3/R1))', 'Q'],
    ['f_0 without 2π', 'lp2-sku', '1/(2*pi*sqrt(R1*R2*C1*C2))', '1/sqrt(R1*R2*C1*C2)', 'f_0'],
    ['f_0 with π for 2π', 'lp2-sku', '1/(2*pi*sqrt(R1*R2*C1*C2))', '1/(pi*sqrt(R1*R2*C1*C2))', 'f_0'],
    ['f_0 without its root', 'bp1-wide', 'formula: 1/(2*pi*sqrt(Ri*Ci*Rf*Cf))', 'formula: 1/(2*pi*Ri*Ci)', 'f_0'],
    ['edges taken for the poles', 'bp1-wide', 'f_0*(sqrt(1 + 1/(4*Q^2)) - 1/(2*Q))', '1/(2*pi*Ri*Ci)', 'f_1'],
    ['edges exchanged', 'bp1-wide', 'sqrt(1 + 1/(4*Q^2)) + 1/(2*Q)', 'sqrt(1 + 1/(4*Q^2)) - 1/(2*Q)', 'f_2'],
    ['the asymptote taken for the gain', 'bp1-wide', 'formula: -Rf*Ci/(Ri*Ci + Rf*Cf)', 'formula: -Rf/Ri', 'K_0'],
    ['a gain less one', 'lp1-ni', 'formula: 1 + Rf/Rg', 'formula: Rf/Rg', 'K'],
    ['a corner taken for f_0', 'lp2-sku', '"f_0*sqrt(1 - 1/(2*Q^2) + sqrt((1 - 1/(2*Q^2))^2 + 1))"', 'f_0', 'f_c'],
    ['an impedance of another part', 'hp1-inv', 'formula: Ri, unit: ohm', 'formula: Rf, unit: ohm', 'Z_in'],
    ['a figure never defined', 'lp1-inv', 'formula: -Rf/Ri, meaning', 'formula: sqrt(-1 - Rf/Ri), meaning', 'K'],
    ['a response without one term', 'lp2-sku', SKU_RESPONSE, 'response: 1/(1 + s*C2*R1 + s^2*R1*R2*C1*C2)', 'response'],
    ['a response of lower order', 'lp2-sku', SKU_RESPONSE, 'response: 1/(1 + s*C2*(R1 + R2))', 'response'],
    [
      'a response right only at equal resistors',
      'lp2-sku',
      SKU_RESPONSE,
      'response: 1/(1 + 2*s*C2*R1 + s^2*R1^2*C1*C2)',
      'response',
    ],
    [
      'a response of the conjugate',
      'lp1-inv',
      'response: -(Rf/Ri)/(1 + s*Rf*Cf)',
      'response: -(Rf/Ri)/(1 - s*Rf*Cf)',
      'response',
    ],
    [
      'a response with a stray term in the stop-band',
      'lp1-inv',
      'response: -(Rf/Ri)/(1 + s*Rf*Cf)',
      'response: -(Rf/Ri)/(1 + s*Rf*Cf) + 1e-6',
      'response',
    ],
  ])('%s', (_, code, from, to, subject) => {
    const check = checkWith(code, from, to)
    expect(check.outcome).toBe('differs')
    expect(outcomes(check)[subject]).toBe('differs')
    expect(Number.isFinite(check.worstRelativeDifference)).toBe(true)
    expect(check.lines.find((line) => line.subject === subject)!.detail).toMatch(/\.$/)
  })

  it('but the same formula written otherwise agrees', () => {
    const check = checkWith('lp2-mfb', MFB_Q, 'sqrt(C1/C2)/(sqrt(R3/R2) + sqrt(R2/R3) + sqrt(R2*R3)/R1)')
    expect(outcomes(check)['Q']).toBe('agrees')
  })
})

describe('the outcome of the whole', () => {
  it('is differs as soon as one line differs, whatever the others say', () => {
    const check = checkWith('lp1-inv', 'formula: Ri, unit: ohm', 'formula: 2*Ri, unit: ohm')
    expect(outcomes(check)).toEqual({ response: 'agrees', f_c: 'agrees', K: 'agrees', Z_in: 'differs' })
    expect(check.outcome).toBe('differs')
    expect(check.worstRelativeDifference).toBeCloseTo(1, 9)
  })

  it('is agrees when what was checked agrees, and lines without is: stay not checked', () => {
    const check = checkWith('lp1-inv', ', is: half-power frequency', '')
    expect(outcomes(check)['f_c']).toBe('not checked')
    expect(check.outcome).toBe('agrees')
    expect(check.lines.find((line) => line.subject === 'f_c')).toMatchObject({
      worstRelativeDifference: null,
      detail: 'No is: says what it must equal on the circuit.',
    })
  })

  it('does not tell a line without is: wrong, however wrong it is', () => {
    const text = seedPage('lp1-inv').replace('formula: 1/(2*pi*Rf*Cf), unit', 'formula: 1/(Rf*Cf), unit')
    const { stage } = valueOf(readBlock(text.replace(', is: half-power frequency', '')))
    expect(outcomes(selfCheck(stage, defaultValues(stage)))['f_c']).toBe('not checked')
  })
})

describe('a result without a formula', () => {
  it('is the figure found on the circuit, and is not checked', () => {
    const calculator = [
      'parts:',
      '  R1: { default: 10k }',
      '  C1: { default: 10n }',
      'results:',
      '  f_c: { unit: Hz, meaning: corner, is: half-power frequency }',
      '  twice: { formula: 2*f_c, unit: Hz, meaning: an octave above }',
    ].join('\n')
    const circuit = [
      'input in 1,3',
      'wire 1,3 2,3',
      'R R1 2,3 5,3',
      'C C1 5,3 5,6',
      'ground 5,6',
      'output out 5,3',
    ].join('\n')
    const stage = valueOf(readStage({ circuit, calculator }))
    const { results } = evaluated(stage, {})
    // 1/(2π · 10 kΩ · 10 nF) = 1591.549 Hz. Textbook.
    expect(results['f_c']!.value).toAgreeWith(1 / (2 * Math.PI * 1e-4), { relative: 1e-9 })
    expect(results['twice']!.value).toAgreeWith(2 / (2 * Math.PI * 1e-4), { relative: 1e-9 })
    expect(selfCheck(stage, defaultValues(stage)).outcome).toBe('not checked')
  })

  it('cannot be a target', () => {
    const reading = readBlock(seedPage('lp1-inv').replace('f_c: { formula: 1/(2*pi*Rf*Cf), unit', 'f_c: { unit'))
    expect(reading.ok).toBe(false)
    if (!reading.ok)
      expect(reading.problems.map((one) => one.detail)).toContain('f_c has no formula, so it cannot be a target.')
  })
})
