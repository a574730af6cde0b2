import { describe, expect, it } from 'vitest'
import { prepareCircuit, response } from '#shared/analysis/nodal-analysis'
import { gainAt, polePairs, rationalTransferFunction } from '#shared/analysis/rational'
import { evaluatePolynomial } from '#shared/numerics/polynomial'
import { seededRandom } from '#shared/numerics/random'
import { CHECK_CIRCUITS, netlistOf, netlistOfCheck, readCheck, setDistance, valuesOf } from '../../support/circuits'

// Wanted poles and zeros are closed forms of circuit theory, written out beside each circuit.
const rationalOf = (cards: string[]) => rationalTransferFunction(prepareCircuit(netlistOf(cards)), valuesOf(cards))
const real = (...values: number[]) => values.map((re) => ({ re, im: 0 }))
const pair = (re: number, im: number) => [
  { re, im },
  { re, im: -im },
]
const stage = (from: string, inner: string, to: string, k: number, ohm = 1000, farad = 1e-7) => [
  `R${k} ${from} ${inner} ${ohm}`,
  `C${k} ${inner} 0 ${farad}`,
  `EU${k} ${to} 0 ${inner} ${to}`,
]

describe('poles and zeros', () => {
  const root12 = Math.sqrt(12)
  it.each([
    [
      'a symmetrical twin-T: s² + 4ω₀s + ω₀², notch at ω₀',
      ['R1 in a 10000', 'R2 a out 10000', 'C3 a 0 2e-8', 'C1 in b 1e-8', 'C2 b out 1e-8', 'R3 b 0 5000'],
      real(-1e4 * (2 - Math.sqrt(3)), -1e4 * (2 + Math.sqrt(3))),
      pair(0, 1e4),
    ],
    [
      'an RC ladder of two equal sections: s² + 3s + 1',
      ['R1 in a 1000', 'C1 a 0 1e-6', 'R2 a out 1000', 'C2 out 0 1e-6'],
      real((-3 + Math.sqrt(5)) * 500, (-3 - Math.sqrt(5)) * 500),
      [],
    ],
    ['a lossless LC', ['L1 in out 1e-3', 'C1 out 0 1e-6'], pair(0, Math.sqrt(1e9)), []],
    ['two equal buffered sections', [...stage('in', 'a', 'b', 1), ...stage('b', 'c', 'out', 2)], real(-1e4, -1e4), []],
    [
      'four equal buffered sections',
      [
        ...stage('in', 'a', 'b', 1),
        ...stage('b', 'c', 'd', 2),
        ...stage('d', 'e', 'f', 3),
        ...stage('f', 'g', 'out', 4),
      ],
      real(-1e4, -1e4, -1e4, -1e4),
      [],
    ],
    [
      'two sections 1e-6 apart',
      [...stage('in', 'a', 'b', 1), ...stage('b', 'c', 'out', 2, 1000.001)],
      real(-1e4, -1e7 / 1000.001),
      [],
    ],
    [
      'three sections 0.1 % apart',
      [...stage('in', 'a', 'b', 1), ...stage('b', 'c', 'd', 2, 1001), ...stage('d', 'e', 'out', 3, 1002)],
      real(-1e4, -1e7 / 1001, -1e7 / 1002),
      [],
    ],
    [
      'sections twelve decades apart',
      [...stage('in', 'a', 'b', 1, 1, 1e-12), ...stage('b', 'c', 'out', 2, 1e6, 1e-6)],
      real(-1e12, -1),
      [],
    ],
    ['an integrator', ['R1 in n 10000', 'C1 n out 1e-8', 'EU1 out 0 0 n'], real(0), []],
    ['a differentiator', ['C1 in n 1e-8', 'R1 n out 10000', 'EU1 out 0 0 n'], [], real(0)],
    [
      'a first-order all-pass',
      ['R1 in n 10000', 'R2 n out 10000', 'R3 in p 10000', 'C1 p 0 1e-8', 'EU1 out 0 p n'],
      real(-1e4),
      real(1e4),
    ],
    [
      'a series trap: R(s² + ω²)',
      ['R1 in out 100', 'L1 out a 1e-3', 'C1 a 0 1e-6'],
      real((-100 + Math.sqrt(100 ** 2 - 4e3)) / 2e-3, (-100 - Math.sqrt(100 ** 2 - 4e3)) / 2e-3),
      pair(0, Math.sqrt(1e9)),
    ],
    ['a mode that no output sees', ['R1 in out 1000', 'R2 out 0 1000', 'R3 in x 1000', 'C1 x 0 1e-6'], [], []],
    [
      'an exact pole-zero match: R1C1 = R2C2 with decimals that doubles miss',
      ['R1 in out 1000', 'C1 in out 2.2e-9', 'R2 out 0 100', 'C2 out 0 2.2e-8'],
      [],
      [],
    ],
    [
      'a tank of Q = 100',
      ['R1 in out 1e5', 'L1 out 0 1e-3', 'C1 out 0 1e-9'],
      pair(-5000, Math.sqrt(1e12 - 25e6)),
      real(0),
    ],
    ['a pair of resistors that divide', ['R1 in out 1000', `R2 out 0 ${1000 / root12}`], [], []],
  ])('finds those of %s', (_, cards, poles, zeros) => {
    const h = rationalOf(cards)
    expect(setDistance(h.poles, poles)).toBeLessThan(1e-9)
    expect(setDistance(h.zeros, zeros)).toBeLessThan(1e-9)
  })

  it('gives copies of a multiple pole as equal numbers, in complex pairs too', () => {
    const section = (from: string, to: string, k: number) => [
      `R${k}1 ${from} a${k} 10000`,
      `R${k}2 a${k} p${k} 10000`,
      `C${k}1 a${k} ${to} 2e-8`,
      `C${k}2 p${k} 0 1e-8`,
      `EU${k} ${to} 0 p${k} ${to}`,
    ]
    const { poles } = rationalOf([...section('in', 'o', 1), ...section('o', 'out', 2)])
    // Sallen & Key, unity gain: ω₀² = 1/(R²·C1·C2), 2σ = 2/(R·C1): −5000 ± j5000.
    expect(setDistance(poles, [...pair(-5000, 5000), ...pair(-5000, 5000)])).toBeLessThan(1e-12)
    expect(new Set(poles.map(({ re, im }) => `${re} ${im}`)).size).toBe(2)
  })

  it('is zero where nothing comes through', () => {
    const h = rationalOf(['R1 in 0 1000', 'R2 out 0 1000'])
    expect([h.gain, h.numerator, h.zeros]).toEqual([0, [0], []])
  })
})

describe('coefficients', () => {
  it('are those of the closed form, one in front of the denominator', () => {
    // Source: closed form of the multiple-feedback low-pass (Huelsman & Allen 1980, from memory), as in the check file.
    const { R1, R2, R3, C1, C2 } = readCheck('lp2-mfb').parts as Record<'R1' | 'R2' | 'R3' | 'C1' | 'C2', number>
    const h = rationalTransferFunction(prepareCircuit(netlistOfCheck('lp2-mfb')), { R1, R2, R3, C1, C2 })
    const a2 = R2 * R3 * C1 * C2
    const a1 = C2 * (R2 + R3 + (R2 * R3) / R1)
    expect(h.denominator).toAgreeWith([1, a1 / a2, 1 / a2], { relative: 1e-12 })
    expect(h.numerator).toAgreeWith([-R2 / R1 / a2], { relative: 1e-12 })
  })

  it.each(CHECK_CIRCUITS)('and poles and zeros follow the nodal analysis of %s at any values', (name) => {
    const random = seededRandom(11)
    const prepared = prepareCircuit(netlistOfCheck(name))
    for (let set = 0; set < 30; set++) {
      const values = Object.fromEntries(
        Object.entries(readCheck(name).parts).map(([ref, value]) => [ref, value * 10 ** (6 * random() - 3)]),
      )
      const h = rationalTransferFunction(prepared, values)
      const sizes = h.poles.map(({ re, im }) => Math.hypot(re, im) / (2 * Math.PI))
      const frequencies = [0.01, 0.3, 1, 1.1, 7, 300].flatMap((share) => sizes.map((f) => share * f))
      const direct = response(prepared, values, frequencies)
      frequencies.forEach((f, k) => {
        const { re, im } = gainAt(h, f)
        const size = Math.hypot(re, im)
        expect(Math.hypot(re - direct.re[k]!, im - direct.im[k]!)).toBeLessThanOrEqual(1e-9 * size)
        const s = { re: 0, im: 2 * Math.PI * f }
        const [n, d] = [evaluatePolynomial(h.numerator, s), evaluatePolynomial(h.denominator, s)]
        expect(Math.hypot(n.re, n.im) / Math.hypot(d.re, d.im)).toAgreeWith(size, { relative: 1e-9 })
      })
    }
  })
})

describe('pole pairs', () => {
  it('are sorted by natural frequency and pair real poles from the lowest', () => {
    const found = polePairs([...pair(-3, 4), ...real(-8, -2, -100), ...pair(-0.5, 1)])
    expect(found.map(({ naturalHz }) => naturalHz * 2 * Math.PI)).toAgreeWith([Math.hypot(0.5, 1), 4, 5], {
      relative: 1e-14,
    })
    expect(found.map(({ q }) => q)).toAgreeWith([Math.hypot(0.5, 1), 0.4, 5 / 6], { relative: 1e-14 })
  })

  it('have infinite Q on the axis and negative Q in the right half', () => {
    expect(polePairs(pair(0, 2))[0]!.q).toBe(Infinity)
    expect(polePairs(pair(3, 4))[0]!.q).toAgreeWith(-5 / 6, { relative: 1e-15 })
  })
})
