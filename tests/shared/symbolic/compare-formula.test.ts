import { describe, expect, it } from 'vitest'
import type { Formula } from '#shared/formula/parse'
import { parseFormula } from '#shared/formula/parse'
import { valueOf } from '#shared/problems'
import { compareExactly } from '#shared/symbolic/compare-formula'
import { symbolicTransferFunction } from '#shared/symbolic/transfer-function'
import { CHECK_CIRCUITS, netlistOf, netlistOfCheck, readCheck } from '../../support/circuits'
import { HOUSE_BLOCKS, stageOf } from '../../support/stages'

const response = (text: string) => valueOf(parseFormula(text, { kind: 'response' }))
const resultsOf = (texts: Record<string, string>) =>
  new Map(
    Object.entries(texts).map(([name, text]): [string, Formula] => [
      name,
      valueOf(parseFormula(text, { kind: 'value' })),
    ]),
  )
const outputsOf = CHECK_CIRCUITS.flatMap((name) =>
  Object.keys(readCheck(name).outputs).map((out) => [name, out] as const),
)
const compared = (name: string, text: string, results: Record<string, string> = {}, output?: string) =>
  compareExactly(symbolicTransferFunction(netlistOfCheck(name), { output }), response(text), resultsOf(results))

describe('exact comparison with H(s)', () => {
  // Source of closed_form.H: the header of each check file.
  it.each(outputsOf)(
    'finds the closed form of %s, output %s, equal, and each change of it different',
    (name, output) => {
      const text = readCheck(name).closed_form.H[output]!
      expect(compared(name, text, {}, output)).toBe('equal')
      const h = symbolicTransferFunction(netlistOfCheck(name), { output })
      expect(compareExactly(h, response(h.text))).toBe('equal')
      for (const part of Object.keys(readCheck(name).parts)) {
        const wrong = text.replaceAll(new RegExp(`\\b${part}\\b`, 'g'), `(1.000001*${part})`)
        expect(compared(name, wrong, {}, output)).toBe('differs')
      }
      for (const wrong of [`-(${text})`, `(${text})*(1 + 1e-12)`, `(${text})/(1 + s*1e-15)`, `(${text}) + 1e-18`, '0'])
        expect(compared(name, wrong, {}, output)).toBe('differs')
    },
  )

  it('tells apart what is right only where two parts are equal', () => {
    expect(compared('lp2-sallen-key-unity', '1/(1 + 2*s*C2*R1 + s^2*R1*R2*C1*C2)')).toBe('differs')
    expect(compared('ap1-noninverting', '(1 - s*R3*C1)/(1 + s*R3*C1)')).toBe('differs')
  })

  it.each(HOUSE_BLOCKS)('finds the response of the block %s equal', (code) => {
    const stage = stageOf(code)
    const results = new Map(stage.results.flatMap((one) => (one.formula ? [[one.name, one.formula] as const] : [])))
    for (const { output, formula } of stage.responses)
      expect(compareExactly(symbolicTransferFunction(stage.netlist, { output }), formula, results)).toBe('equal')
  })
})

describe("with the page's own results put in", () => {
  // Textbook normal form of a second-order section; figures as closed_form.figures of the check file.
  const figures = {
    f_0: '1/(2*pi*sqrt(R2*R3*C1*C2))',
    Q: 'sqrt(C1/C2)/(sqrt(R3/R2) + sqrt(R2/R3) + sqrt(R2*R3)/R1)',
    K: '-R2/R1',
    w_0: '2*pi*f_0',
  }
  const normal = 'K*w_0^2/(s^2 + s*w_0/Q + w_0^2)'

  it('finds the normal form in K, f_0 and Q equal, square roots and pi included', () => {
    expect(compared('lp2-mfb', normal, figures)).toBe('equal')
    expect(compared('lp2-mfb', normal, { ...figures, Q: 'sqrt(R2*R3*C1*C2)/(C2*(R2 + R3 + R2*R3/R1))' })).toBe('equal')
  })

  it('finds a wrong one different', () => {
    expect(compared('lp2-mfb', normal, { ...figures, Q: 'sqrt(C1/C2)/(sqrt(R3/R2) + sqrt(R2/R3))' })).toBe('differs')
    expect(compared('lp2-mfb', normal, { ...figures, f_0: '1/(6.283185307179586*sqrt(R2*R3*C1*C2))' })).toBe('differs')
    expect(compared('lp2-mfb', normal, { ...figures, f_0: '1/(2*pi*sqrt(R2*R3*C1*C1))' })).toBe('differs')
  })

  it('knows the roots of sums and of numbers', () => {
    const band = { w_0: 'sqrt((R1 + R2)/(R1*R2*R3*C1*C2))', B: '(C1 + C2)/(R3*C1*C2)' }
    expect(compared('bp2-mfb', '-(s/(R1*C1))/(s^2 + s*B + w_0^2)', band)).toBe('equal')
    expect(compared('lp1-inverting', '-sqrt(8)*sqrt(Rf^2)/(sqrt(2)*2*Ri)/(1 + s*Rf*Cf)')).toBe('equal')
    expect(compared('lp1-inverting', '-sqrt(3)*sqrt(Rf^2)/(sqrt(2)*2*Ri)/(1 + s*Rf*Cf)')).toBe('differs')
    expect(compared('lp1-inverting', '-(Rf/Ri)/(1 + s*t)', { t: 'sqrt(Rf^2 + 2*Rf*Cf*0 + 0)*Cf^1' })).toBe('equal')
    expect(compared('lp2-sallen-key-unity', '1/(1 + s*C2*w^2 + s^2*R1*R2*C1*C2)', { w: 'sqrt(R1 + R2)' })).toBe('equal')
    const squared = { w: 'sqrt(R1^2 + 2*R1*R2 + R2^2)' }
    expect(compared('lp2-sallen-key-unity', '1/(1 + s*C2*w + s^2*R1*R2*C1*C2)', squared)).toBe('equal')
  })

  it('knows par and ser', () => {
    const h = symbolicTransferFunction(netlistOf(['R1 in out', 'R2 out 0', 'C1 out 0']))
    expect(compareExactly(h, response('par(R2, 1/(s*C1))/ser(R1, par(R2, 1/(s*C1)))'))).toBe('equal')
    expect(compareExactly(h, response('par(R2, 1/(s*C1))/ser(R1, R2)'))).toBe('differs')
  })
})

describe('what cannot be compared exactly', () => {
  it.each([
    ['an exponential', '-(Rf/Ri)*exp(-s*Rf*Cf)', {}],
    ['a root of s', '-(Rf/Ri)/sqrt(1 + s*Rf*Cf)', {}],
    ['a nested root', 'x/(1 + s*Rf*Cf)', { x: 'sqrt(1 + sqrt(2))' }],
    ['a figure found on the circuit', 'K/(1 + s*Rf*Cf)', {}],
    ['another function in a result', '-(Rf/Ri)/(1 + s*t)', { t: 'max(Rf*Cf, 1)' }],
    ['results in a circle', 'a/(1 + s*Rf*Cf)', { a: 'b', b: 'a' }],
    ['a division by zero', '1/(Rf - Rf)', {}],
    ['a root whose sign is not known', 'x/(1 + s*Rf*Cf)', { x: 'sqrt((Rf - Ri)^2)' }],
    ['a root of a negative number', 'x', { x: 'sqrt(-2)' }],
  ])('is %s', (_, text, results) => {
    expect(compared('lp1-inverting', text, results)).toBe('not rational')
  })

  // Hostile sizes; 1 s allows for a busy machine.
  it.each([
    ['huge powers', '((((1 + s*Rf)^20)^20)^20)^20', {}],
    ['sums to high powers', '(1 + s + Rf + Ri + Cf + s*Rf*Cf)^20*(Rf + Ri + Cf + s)^20', {}],
    ['huge numbers', '(((1e300)^20)^20)^20*Rf', {}],
    ['results that double', 'e', { a: '(Rf+Ri)*(Rf+Cf)', b: 'a*a*a*a', c: 'b*b*b*b', d: 'c*c*c*c', e: 'd*d*d*d' }],
    ['long chains of quotients', Array.from({ length: 60 }, (_, k) => `1/(${k + 1}*Rf+s)`).join('+'), {}],
  ])('ends soon on %s', (_, text, results) => {
    const start = performance.now()
    expect(['differs', 'not rational']).toContain(compared('lp1-inverting', text, results))
    expect(performance.now() - start).toBeLessThan(1000)
  })
})
