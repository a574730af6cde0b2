import katex from 'katex'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { formulaTex, nameTex, splitName } from '#shared/formula/tex'
import { formulaOf } from '../../support/formulas'

const render = (tex: string) => katex.renderToString(tex, { strict: 'error', throwOnError: true, trust: false })

describe('a typeset formula', () => {
  it.each([
    ['1/(2*pi*Rf*C1)', '\\frac{1}{2\\,\\pi\\,R_{\\mathrm{f}}\\,C_{1}}'],
    ['-Rf/Ri', '-\\frac{R_{\\mathrm{f}}}{R_{\\mathrm{i}}}'],
    ['-s*Rf*Ci/(1 + s)', '-\\frac{s\\,R_{\\mathrm{f}}\\,C_{\\mathrm{i}}}{1 + s}'],
    ['-(a + b)*c', '-\\left(a + b\\right)\\,c'],
    ['--a*b', '-\\left(-a\\right)\\,b'],
    ['a*-b', 'a\\,\\left(-b\\right)'],
    ['(1 + a)*(1 + b)', '\\left(1 + a\\right)\\,\\left(1 + b\\right)'],
    ['sqrt(a)', '\\sqrt{a}'],
    ['par(Ra, Rb)', 'R_{\\mathrm{a}} \\parallel R_{\\mathrm{b}}'],
    ['par(a, b) + c', '\\left(a \\parallel b\\right) + c'],
    ['ser(par(a, b), -c)', '\\left(a \\parallel b\\right) + \\left(-c\\right)'],
    ['par(a + b, c)', '\\left(a + b\\right) \\parallel c'],
    ['a + -b', 'a + \\left(-b\\right)'],
    ['a - (b + c)', 'a - \\left(b + c\\right)'],
    ['a - (b - c)', 'a - \\left(b - c\\right)'],
    ['a + (b - c)', 'a + b - c'],
    ['(a + b)*c', '\\left(a + b\\right)\\,c'],
    ['(-a)^2', '\\left(-a\\right)^{2}'],
    ['-a^2', '-a^{2}'],
    ['(a^b)^c', '\\left(a^{b}\\right)^{c}'],
    ['a^b^c', 'a^{b^{c}}'],
    ['(a/b)^2', '\\left(\\frac{a}{b}\\right)^{2}'],
    ['a*(2*b)', 'a \\cdot 2\\,b'],
    ['1e3^2', '\\left(1\\cdot 10^{3}\\right)^{2}'],
    ['30 kΩ', '30\\,\\mathrm{k\\Omega}'],
    ['30 kohm*C', '30\\,\\mathrm{k\\Omega} \\cdot C'],
    ['1/30k', '\\frac{1}{30\\,\\mathrm{k}}'],
    ['4k7', '4.7\\,\\mathrm{k}'],
    ['4R7', '4.7\\,\\mathrm{\\Omega}'],
    ['10R', '10\\,\\mathrm{\\Omega}'],
    ['12.34567 kHz', '12.34567\\,\\mathrm{kHz}'],
    ['0.1 uF', '0.1\\,\\mathrm{\\mu F}'],
    ['5 %', '5\\,\\mathrm{\\%}'],
    ['25 ppm', '25\\,\\mathrm{ppm}'],
    ['5 V/us', '5\\,\\mathrm{V/\\mu s}'],
    ['8 nV/√Hz', '8\\,\\mathrm{nV/\\sqrt{Hz}}'],
    ['2 K', '2\\,\\mathrm{K}'],
    ['5meg', '5\\,\\mathrm{M}'],
    ['abs(K)', '\\left|K\\right|'],
    ['dB(K)', '20\\log_{10}\\left|K\\right|'],
    ['GBW(U1)', '\\mathrm{GBW}(\\mathrm{U1})'],
  ])('%s', (text, wanted) => expect(formulaTex(formulaOf(text))).toBe(wanted))

  it.each([
    ['(a > 1 or b > 2) and c != 3', '\\left(a > 1\\;\\text{or}\\;b > 2\\right)\\;\\text{and}\\;c \\ne 3'],
    ['a > 1 or b > 2 and c <= 3', 'a > 1\\;\\text{or}\\;b > 2\\;\\text{and}\\;c \\le 3'],
    ['not (a >= 1)', '\\neg\\left(a \\ge 1\\right)'],
  ])('%s', (text, wanted) => expect(formulaTex(formulaOf(text, 'condition'))).toBe(wanted))

  it('shows symbols in place of names', () =>
    expect(formulaTex(formulaOf('K*toString'), { K: 'K_0' })).toBe('K_{0}\\,\\mathrm{toString}'))

  it('is accepted by the typesetter, whatever the formula', () => {
    const { any } = fc.letrec<{ any: string }>((tie) => ({
      any: fc.oneof(
        { depthSize: 'medium' },
        fc.constantFrom(
          'Rf',
          'f_c',
          'Z_in_2',
          'τ',
          'pi',
          'k_B',
          '1e-3',
          '4k7',
          '2.4 kHz',
          '1 µF',
          '5 %',
          '30k',
          'SR(U1)',
        ),
        fc
          .tuple(tie('any'), fc.constantFrom('+', '-', '*', '/', '^'), tie('any'))
          .map(([a, o, b]) => `(${a})${o}(${b})`),
        tie('any').map((a) => `-(${a})`),
        fc
          .tuple(fc.constantFrom('sqrt', 'abs', 'exp', 'ln', 'log10', 'sin', 'cos', 'tan', 'atan', 'dB'), tie('any'))
          .map(([name, a]) => `${name}(${a})`),
        fc
          .tuple(fc.constantFrom('par', 'ser', 'min', 'max', 'atan2'), tie('any'), tie('any'))
          .map(([name, a, b]) => `${name}(${a}, ${b})`),
      ),
    }))
    fc.assert(
      fc.property(any, (text) => {
        fc.pre(text.length < 1000)
        expect(render(formulaTex(formulaOf(text)))).toContain('katex')
      }),
      { numRuns: 200, seed: 2 },
    )
  })
})

describe('names', () => {
  it.each([
    ['Rf', 'R_{\\mathrm{f}}'],
    ['C1', 'C_{1}'],
    ['R1a', 'R_{\\mathrm{1a}}'],
    ['f_c', 'f_{\\mathrm{c}}'],
    ['f_0', 'f_{0}'],
    ['Z_in', 'Z_{\\mathrm{in}}'],
    ['Q', 'Q'],
    ['omega_0', '\\omega_{0}'],
    ['τ', '\\tau'],
    ['k_B', 'k_{\\mathrm{B}}'],
    ['sourceOhm', '\\mathrm{sourceOhm}'],
  ])('%s', (name, wanted) => expect(nameTex(name)).toBe(wanted))

  it.each([
    '\\href{javascript:alert(1)}{x}',
    'a}\\def\\x{\\x\\x}\\x{',
    'R_{\\htmlData{a=b}{c}}',
    '$\\includegraphics{http://x}$',
    '%\n\\input',
    '<img src=x onerror=alert(1)>',
    '^^5c',
    '',
    '_',
    '__proto__',
    '#1&~',
  ])('takes no command from %s', (name) => {
    const tex = nameTex(name)
    expect(tex).toMatch(/^(?:\\mathrm\{[\p{L}\p{N}]*\}|[\p{L}\p{N}])?(?:_\{(?:\\mathrm\{[\p{L}\p{N},]*\}|\d+)\})?$/u)
    expect(() => render(tex)).not.toThrow()
  })

  it('are split into a letter and a subscript', () => {
    expect(splitName('Rf')).toEqual(['R', 'f'])
    expect(splitName('Z_in')).toEqual(['Z', 'in'])
    expect(splitName('Q')).toEqual(['Q', ''])
  })
})
