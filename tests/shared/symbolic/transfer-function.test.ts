import katex from 'katex'
import { describe, expect, it } from 'vitest'
import { prepareCircuit, responseAt } from '#shared/analysis/nodal-analysis'
import { compileComplexFormula } from '#shared/formula/compile-complex'
import { parseFormula } from '#shared/formula/parse'
import type { Netlist } from '#shared/circuit/netlist/netlist'
import { seededRandom } from '#shared/numerics/random'
import { ProblemError, valueOf } from '#shared/problems'
import { compareExactly } from '#shared/symbolic/compare-formula'
import type { SymbolicAsked } from '#shared/symbolic/transfer-function'
import { symbolicAt, symbolicTransferFunction } from '#shared/symbolic/transfer-function'
import { CHECK_CIRCUITS, netlistOf, netlistOfCheck, readCheck, valuesOfCheck } from '../../support/circuits'

type Values = Record<string, number>

/** Complex frequencies over four decades, off the axes too. */
const POINTS = [0.01, 0.1, 0.7, 1, 1.6, 10, 100].flatMap((x) => [
  { re: 0, im: x },
  { re: 0.3 * x, im: x },
])

const randomValues = (names: readonly string[], random: () => number): Values =>
  Object.fromEntries(names.map((name) => [name, 10 ** (2 * random() - 1)]))

const passiveRefs = (netlist: Netlist) => netlist.elements.filter((e) => e.kind !== 'opamp').map((e) => e.ref)

/** Largest |ΔH| over the largest |H| of the two. */
function gap(a: { re: number; im: number }, b: { re: number; im: number }) {
  return Math.hypot(a.re - b.re, a.im - b.im) / (Math.max(Math.hypot(a.re, a.im), Math.hypot(b.re, b.im)) || 1)
}

const outputsOf = CHECK_CIRCUITS.flatMap((name) =>
  Object.keys(readCheck(name).outputs).map((out) => [name, out] as const),
)

describe('H(s) in part names', () => {
  // Source of closed_form.H: the header of each check file (textbook closed forms, confirmed by NumPy nodal analysis).
  it.each(outputsOf)('of %s, output %s, equals the closed form and the nodal analysis', (name, output) => {
    const netlist = netlistOfCheck(name)
    const h = symbolicTransferFunction(netlist, { output })
    const names = Object.keys(readCheck(name).parts)
    const closed = compileComplexFormula(
      valueOf(parseFormula(readCheck(name).closed_form.H[output]!, { kind: 'response' })),
      names,
    )
    const written = compileComplexFormula(valueOf(parseFormula(h.text, { kind: 'response' })), names)
    const random = seededRandom(7)
    const prepared = prepareCircuit(netlist)
    const sets: [Values, number][] = [
      [{ ...valuesOfCheck(name) }, 2 * Math.PI * readCheck(name).response.frequency_Hz[30]!],
      ...Array.from({ length: 8 }, (): [Values, number] => [randomValues(names, random), 1]),
    ]
    const out = new Float64Array(2)
    for (const [values, rate] of sets)
      for (const point of POINTS) {
        const s = { re: point.re * rate, im: point.im * rate }
        const vector = Float64Array.from(names, (one) => values[one]!)
        const found = symbolicAt(h, values, s)
        closed(vector, s.re, s.im, out)
        expect(gap(found, { re: out[0]!, im: out[1]! })).toBeLessThan(1e-9)
        written(vector, s.re, s.im, out)
        expect(gap(found, { re: out[0]!, im: out[1]! })).toBeLessThan(1e-9)
        expect(gap(found, responseAt(prepared, values, s, output))).toBeLessThan(1e-9)
      }
  })

  it.each(outputsOf)('of %s, output %s, is shown by KaTeX, equations too', (name, output) => {
    const { tex, equations } = symbolicTransferFunction(netlistOfCheck(name), { output })
    for (const one of [tex, ...equations])
      expect(katex.renderToString(one, { throwOnError: true, strict: 'error' })).toContain('katex')
    expect(equations.at(-1)).toContain(tex)
  })

  // Wanted: the forms in which these responses are printed in the trade's textbooks (closed_form of the check files).
  it.each([
    ['lp1-inverting', 'out', '-(Rf/Ri)/(1 + s*Rf*Cf)'],
    ['hp1-inverting', 'out', '-s*Rf*Ci/(1 + s*Ri*Ci)'],
    ['bp-wide-inverting', 'out', '-s*Rf*Ci/((1 + s*Rf*Cf)*(1 + s*Ri*Ci))'],
    ['lp1-noninverting-gain', 'out', '(1 + Rf/Rg)/(1 + s*R1*C1)'],
    ['lp2-mfb', 'out', '-(R2/R1)/(1 + s*C2*(R2 + R3 + R2*R3/R1) + s^2*R2*R3*C1*C2)'],
    ['lp2-sallen-key-unity', 'out', '1/(1 + s*C2*(R1 + R2) + s^2*R1*R2*C1*C2)'],
    ['hp2-sallen-key-unity', 'out', 's^2*R1*R2*C1*C2/(1 + s*R1*(C1 + C2) + s^2*R1*R2*C1*C2)'],
    ['ap1-noninverting', 'out', '(1 - s*R2*R3*C1/R1)/(1 + s*R3*C1)'],
    ['biquad-tow-thomas', 'lp', '(R3*R5/(R1*R6))/(1 + s*R3*R4*R5*C2/(R2*R6) + s^2*R3*R4*R5*C1*C2/R6)'],
  ])('of %s, output %s, is grouped as it is read: %s', (name, output, text) => {
    expect(symbolicTransferFunction(netlistOfCheck(name), { output }).text).toBe(text)
  })

  it('leads from the currents at each node to H(s)', () => {
    expect(symbolicTransferFunction(netlistOfCheck('hp1-inverting')).equations).toEqual([
      'V_{\\mathrm{n}} = 0',
      '\\frac{V_{\\mathrm{m}} - V_{\\mathrm{in}}}{R_{\\mathrm{i}}} + s\\,C_{\\mathrm{i}}\\left(V_{\\mathrm{m}} - V_{\\mathrm{n}}\\right) = 0',
      's\\,C_{\\mathrm{i}}\\left(V_{\\mathrm{n}} - V_{\\mathrm{m}}\\right) + \\frac{V_{\\mathrm{n}} - V_{\\mathrm{out}}}{R_{\\mathrm{f}}} = 0',
      'H(s) = \\frac{V_{\\mathrm{out}}}{V_{\\mathrm{in}}} = -\\frac{s\\,R_{\\mathrm{f}}\\,C_{\\mathrm{i}}}{1 + s\\,R_{\\mathrm{i}}\\,C_{\\mathrm{i}}}',
    ])
  })
})

// Wanted: worked out by hand with voltage dividers.
const pairOut = { outputs: [{ name: 'out', plus: 'op', minus: 'om' }] }
const pairIn = { inputs: [{ name: 'in', plus: 'ip', minus: 'im' }] }
const divided: [string, string[], Parameters<typeof netlistOf>[1], string][] = [
  ['a plain wire', ['R1 in 0', 'R2 in out', 'C1 out 0'], {}, '1/(1 + s*R2*C1)'],
  ['no way through', ['R1 in 0', 'R2 out 0'], {}, '0'],
  ['a follower', ['R1 in 0', 'EU1 out 0 in out'], {}, '1'],
  ['an integrator', ['R1 in n', 'C1 n out', 'EU1 out 0 0 n'], {}, '-1/(s*R1*C1)'],
  ['a lossless ladder', ['L1 in out', 'C1 out 0'], {}, '1/(1 + s^2*L1*C1)'],
  ['a series resonance', ['R1 in out', 'L1 out a', 'C1 a 0'], {}, '(1 + s^2*L1*C1)/(1 + s*R1*C1 + s^2*L1*C1)'],
  ['a divider of capacitors', ['C1 in out', 'C2 out 0'], {}, 'C1/(C1 + C2)'],
  [
    'a bridge, pair out',
    ['R1 in op', 'R2 op 0', 'R3 in om', 'R4 om 0'],
    pairOut,
    '(R2*R3 - R1*R4)/((R1 + R2)*(R3 + R4))',
  ],
  ['a pair in', ['R1 ip out', 'R2 im out'], pairIn, '(R2 - R1)/(2*(R1 + R2))'],
  ['a pair in and out', ['R1 ip op', 'R2 op om', 'R3 om im'], { ...pairIn, ...pairOut }, 'R2/(R1 + R2 + R3)'],
  [
    'a reference held by a resistor',
    ['R1 in out', 'R2 out ref', 'R3 ref 0', 'C1 ref 0'],
    {},
    '(R2 + R3 + s*R2*R3*C1)/(R1 + R2 + R3 + s*R3*C1*(R1 + R2))',
  ],
  ['a reference at ground for signals', ['R1 in out', 'R2 out ref'], { signalGrounds: ['ref'] }, 'R2/(R1 + R2)'],
]

describe('circuits of every kind', () => {
  it.each(divided)('%s', (_, cards, ports, text) => {
    expect(symbolicTransferFunction(netlistOf(cards, ports)).text).toBe(text)
  })

  it('holds the inputs that are not driven at 0 V', () => {
    const netlist = netlistOf(['R1 a n', 'R2 b n', 'R3 n out', 'EU1 out 0 0 n'], {
      inputs: ['a', 'b'].map((plus) => ({ name: plus, plus, minus: '0' })),
    })
    const text = (asked: SymbolicAsked) => symbolicTransferFunction(netlist, asked).text
    expect(text({})).toBe('-R3/R1')
    expect(text({ input: 'b' })).toBe('-R3/R2')
    expect(symbolicTransferFunction(netlist, { input: 'b' }).equations[0]).toBe('V_{\\mathrm{a}} = 0')
  })

  it('takes matched parts for one, and cancels what they have in common', () => {
    const cards = ['R1 in a', 'C1 a 0', 'EU1 b 0 a b', 'R2 b c', 'C2 c 0', 'EU2 out 0 c out']
    const nameOf = (ref: string) => ref[0]!
    expect(symbolicTransferFunction(netlistOf(cards), { nameOf }).text).toBe('1/((1 + s*R*C)*(1 + s*R*C))')
    const bridge = ['R1 in op', 'R2 op 0', 'R3 in om', 'R4 om 0', 'C1 om 0']
    expect(symbolicTransferFunction(netlistOf(bridge, pairOut), { nameOf }).text).toBe('s*R*C/(2*(2 + s*R*C))')
  })

  // Closed form of the symmetrical twin-T: (1 + s²R²C²)/(1 + 4sRC + s²R²C²) with halves and doubles as matched pairs.
  it('cancels the pole on the zero of a symmetrical twin-T', () => {
    const cards = ['R1 in a', 'R2 a out', 'C3 a 0', 'C4 a 0', 'C1 in b', 'C2 b out', 'R3 b 0', 'R4 b 0']
    const h = symbolicTransferFunction(netlistOf(cards), { nameOf: (ref) => ref[0]! })
    expect(h.text).toBe('(1 + s^2*R^2*C^2)/(1 + 4*s*R*C + s^2*R^2*C^2)')
  })

  it.each([
    [['C1 in a', 'C2 a b', 'R1 out 0', 'R2 c d', 'R3 in out'], /floats/],
    [['R1 in out', 'EU1 out 0 in a', 'R2 a 0'], /./],
  ])('names what makes %j singular', (cards, words) => {
    expect(() => symbolicTransferFunction(netlistOf(cards))).toThrow(words)
    expect(() => symbolicTransferFunction(netlistOf(cards))).toThrow(ProblemError)
  })

  it('typesets node names with signs and underscores', () => {
    const cards = ['R1 in+ a_1', 'C1 a_1 out', 'R2 in- out', 'L_x out 0']
    const ports = { inputs: [{ name: 'in', plus: 'in+', minus: 'in-' }] }
    const { equations } = symbolicTransferFunction(netlistOf(cards, ports))
    expect(equations[0]).toBe('V_{\\mathrm{in-}} = -V_{\\mathrm{in+}}')
    for (const one of equations)
      expect(katex.renderToString(one, { throwOnError: true, strict: 'error' })).toContain('katex')
  })

  // Wanted: dividers by hand; the second section sees the source of gain 2.5, the third floats between its nodes.
  it.each([
    [['R1 in a', 'C1 a 0', 'R2 out 0'], { a: 'out', b: '0', plus: 'a', minus: '0', gain: 2.5 }, '5/(2*(1 + s*R1*C1))'],
    [['R1 in a', 'C1 a 0', 'R2 out 0'], { a: 'out', b: '0', plus: '0', minus: 'a', gain: 1 }, '-1/(1 + s*R1*C1)'],
    [['R1 in a', 'R2 out 0'], { a: 'out', b: 'a', plus: 'in', minus: 'a', gain: 1 }, '1'],
    [['R1 in a', 'R2 out 0'], { a: 'a', b: 'out', plus: 'in', minus: '0', gain: 3 }, '-2*R2/(R1 + R2)'],
  ])('puts the gain of a source in: %j %j', (cards, source, text) => {
    const netlist = { ...netlistOf(cards), controlled: [{ ref: 'E7', ...source }] }
    const h = symbolicTransferFunction(netlist)
    expect(h.text).toBe(text)
    const values = randomValues(passiveRefs(netlist), seededRandom(5))
    const s = { re: 0.2, im: 1 }
    expect(gap(symbolicAt(h, values, s), responseAt(prepareCircuit(netlist), values, s))).toBeLessThan(1e-12)
    for (const one of h.equations)
      expect(katex.renderToString(one, { throwOnError: true, strict: 'error' })).toContain('katex')
  })

  it('names the outputs there are', () => {
    expect(() => symbolicTransferFunction(netlistOfCheck('lp2-mfb'), { output: 'x' })).toThrow('the circuit has out')
  })
})

describe('random circuits of up to three op-amps and ten passive parts', () => {
  const NODES = ['0', 'in', 'out', 'a', 'b', 'c', 'd', 'e']
  const randomCards = (random: () => number): string[] => {
    const pick = <T>(list: readonly T[]): T => list[Math.floor(random() * list.length)]!
    const outs = ['out', 'a', 'b'].slice(0, Math.floor(random() * 4))
    const cards = outs.map((out, k) => `EU${k + 1} ${out} 0 ${pick(['0', 'c', 'in'])} ${pick(['d', 'e', 'c', out])}`)
    const count = 4 + Math.floor(random() * 7)
    for (let k = 0; k < count; k++) {
      const from = pick(NODES)
      cards.push(`${pick(['R', 'R', 'C', 'C', 'L'])}${k + 1} ${from} ${pick(NODES.filter((node) => node !== from))}`)
    }
    return cards
  }

  // Source: modified nodal analysis in numbers, shared/analysis, itself held against ngspice.
  it('equal the nodal analysis at random values, and are written as they are', () => {
    const random = seededRandom(20)
    let compared = 0
    let written = 0
    let slowest = 0
    for (let k = 0; k < 1500; k++) {
      const netlist = netlistOf(randomCards(random))
      if (k % 4 === 0) {
        const [a, b, plus, minus] = [0, 0, 0, 0].map(() => NODES[Math.floor(random() * NODES.length)]!)
        const gain = Math.round(40 * random() - 20) / 8
        if (a !== b) netlist.controlled = [{ ref: 'E9', a: a!, b: b!, plus: plus!, minus: minus!, gain }]
      }
      const values = randomValues(passiveRefs(netlist), random)
      const points = [0.3, 1, 3].map((im) => ({ re: 0.2, im }))
      let wanted
      try {
        const prepared = prepareCircuit(netlist)
        wanted = points.map((s) => responseAt(prepared, values, s))
      } catch (error) {
        expect(error).toBeInstanceOf(ProblemError)
        expect(() => symbolicTransferFunction(netlist)).toThrow(ProblemError)
        continue
      }
      const start = performance.now()
      const h = symbolicTransferFunction(netlist)
      slowest = Math.max(slowest, performance.now() - start)
      const found = points.map((s) => symbolicAt(h, values, s))
      const most = Math.max(...wanted.map(({ re, im }) => Math.hypot(re, im)))
      wanted.forEach((w, j) => {
        const difference = Math.hypot(w.re - found[j]!.re, w.im - found[j]!.im)
        // What is exactly 0 comes out of the numbers as rounding.
        expect(difference).toBeLessThanOrEqual(1e-7 * Math.hypot(w.re, w.im) + 1e-9 * most + 1e-15)
      })
      compared++
      const read = parseFormula(h.text, { kind: 'response' })
      if (!read.ok) continue
      const outcome = compareExactly(h, read.value)
      expect(outcome).not.toBe('differs')
      if (outcome === 'equal') written++
    }
    // A quiet machine takes a few milliseconds; the goal is a second.
    expect(slowest).toBeLessThan(1000)
    expect(compared).toBeGreaterThan(400)
    expect(written).toBeGreaterThan(400)
  })
})

describe('effort', () => {
  const ladder = (sections: number) =>
    Array.from({ length: sections }, (_, k) => {
      const [from, to] = [k ? `n${k}` : 'in', k === sections - 1 ? 'out' : `n${k + 1}`]
      return [`R${k + 1} ${from} ${to}`, `C${k + 1} ${to} 0`]
    }).flat()

  it('takes well under a second for three op-amps and ten passive parts', () => {
    const cards = ['R1 in n1', 'R2 n1 bp', 'C1 n1 bp', 'R3 n1 inv', 'EU1 bp 0 0 n1', 'R4 bp n2', 'C2 n2 out']
    const more = ['EU2 out 0 0 n2', 'R5 out n3', 'R6 n3 inv', 'EU3 inv 0 0 n3', 'R7 in n2', 'R8 in n3']
    const start = performance.now()
    const h = symbolicTransferFunction(netlistOf([...cards, ...more]))
    expect(performance.now() - start).toBeLessThan(1000)
    expect(h.numerator.size).toBeGreaterThan(2)
  })

  it('works out a ladder of five sections and refuses one of twelve in a sentence', () => {
    expect(symbolicTransferFunction(netlistOf(ladder(5))).denominator.size).toBe(89) // Fibonacci's eleventh number
    const start = performance.now()
    expect(() => symbolicTransferFunction(netlistOf(ladder(12)))).toThrow(/more than 2000 terms in part names/)
    expect(() => symbolicTransferFunction(netlistOf(ladder(40)))).toThrow(/at most 30 and 24/)
    expect(performance.now() - start).toBeLessThan(2000)
  })

  it('ends soon on a mesh in which every node is joined to every other', () => {
    const nodes = ['0', 'in', 'out', 'a', 'b', 'c', 'd', 'e']
    const pairs = nodes.flatMap((from, k) => nodes.slice(k + 1).map((to) => `${from} ${to}`))
    const cards = pairs.map((pair, k) => `R${k + 1} ${pair}`)
    const start = performance.now()
    expect(() => symbolicTransferFunction(netlistOf(cards))).toThrow(ProblemError)
    expect(performance.now() - start).toBeLessThan(2000)
  })
})
