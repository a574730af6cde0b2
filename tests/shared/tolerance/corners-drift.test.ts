import { describe, expect, it } from 'vitest'
import { seededRandom } from '#shared/numerics/random'
import { riddersLimit } from '#shared/numerics/ridders'
import { corners } from '#shared/tolerance/corners'
import { drift, driftOfPpm } from '#shared/tolerance/drift'
import { sensitivities } from '#shared/tolerance/sensitivities'
import { spreadsOf } from '#shared/tolerance/spread'
import { percentileOf, percentilesInPlace, percentilesOf, sampleStatistics } from '#shared/tolerance/statistics'
import { wilsonShare } from '#shared/tolerance/wilson'
import { yieldSentence } from '#shared/tolerance/yield-sentence'
import { figuresOf } from '../../support/tolerance'

describe('corners of many parts', () => {
  const many = spreadsOf(Array.from({ length: 14 }, (_, k) => ({ name: `R${k}`, nominal: 100, tolerance: 0.02 })))
  const product = many.map(({ ref }, k) => (k % 2 ? `1/${ref}` : ref)).join('*')
  const figures = figuresOf(many, { a: product, b: `-(${product})` })

  it('go by the signs of the sensitivities, and say so', () => {
    const found = corners(many, figures)
    expect(found.method).toBe('sensitivity-signs')
    expect(found.sentence).toContain('signs of the sensitivities to 14 parts')
    // By hand: seven factors rise, seven fall.
    const ratio = (1.02 / 0.98) ** 7
    expect(found.figures.a!.most).toAgreeWith(ratio, { relative: 1e-12 })
    expect(found.figures.a!.least).toAgreeWith(1 / ratio, { relative: 1e-12 })
    expect(found.figures.b!.least).toAgreeWith(-ratio, { relative: 1e-12 })
    expect(found.figures.a!.mostAt.R0).toBe(1)
    expect(found.figures.b!.mostAt.R0).toBe(-1)
  })

  it('give the same as all corners for figures that rise or fall throughout', () => {
    const all = corners(many, figures, 14)
    expect(all.method).toBe('all-corners')
    expect(all.sentence).toContain('16384 corners of 14 parts')
    const signs = corners(many, figures).figures
    for (const name of ['a', 'b']) {
      expect(signs[name]!.least).toAgreeWith(all.figures[name]!.least, { relative: 1e-12 })
      expect(signs[name]!.most).toAgreeWith(all.figures[name]!.most, { relative: 1e-12 })
    }
  })

  it('count parts without tolerance in neither', () => {
    const one = spreadsOf([
      { name: 'R1', nominal: 100, tolerance: 0.1 },
      { name: 'R2', nominal: 100, tolerance: 0 },
    ])
    const found = corners(one, figuresOf(one, { K: 'R2/R1' }))
    expect(found.parts).toBe(1)
    expect(found.figures.K!.mostAt).toEqual({ R1: -1, R2: 0 })
    expect(found.figures.K!.most).toAgreeWith(1 / 0.9, { relative: 1e-15 })
  })

  it('count corners at which a figure is not defined', () => {
    const one = spreadsOf([{ name: 'R', nominal: 100, tolerance: 0.1 }])
    const { x } = corners(one, figuresOf(one, { x: 'sqrt(R - 95)' })).figures
    expect(x!.undefinedCorners).toBe(1)
    expect([x!.least, x!.most]).toAgreeWith([Math.sqrt(15), Math.sqrt(15)], { relative: 1e-12 })
  })
})

describe('sensitivities', () => {
  it.each([0.02, 0.2, 0.9])('hold 1e-9 where a figure is %s from a pole', (gap) => {
    const one = spreadsOf([{ name: 'K', nominal: 3 - gap, tolerance: 0.001 }])
    // By hand: Q = 1/(3 − K) gives S = K/(3 − K).
    const { Q } = sensitivities(one, figuresOf(one, { Q: '1/(3 - K)' }))
    expect(Q!.relative.K).toAgreeWith((3 - gap) / gap, { relative: 1e-9 })
  })

  it('stay apart from steps beyond which the figure is not defined', () => {
    const one = spreadsOf([{ name: 'R', nominal: 100, tolerance: 0.001 }])
    // By hand: S = R/(2(R − 99)).
    const { x } = sensitivities(one, figuresOf(one, { x: 'sqrt(R - 99)' }))
    expect(x!.relative.R).toAgreeWith(50, { relative: 1e-9 })
  })

  it('have no value where the figure is 0', () => {
    const one = spreadsOf([{ name: 'R', nominal: 100, tolerance: 0.001 }])
    expect(sensitivities(one, figuresOf(one, { x: 'R - 100' })).x!.relative.R).toBeNaN()
    expect(riddersLimit([NaN, NaN])).toBeNaN()
  })
})

describe('drift', () => {
  const parts = spreadsOf([
    { name: 'R', nominal: 10e3, tolerance: 0.01 },
    { name: 'C', refs: ['Ca'], nominal: 1e-9, tolerance: 0.05 },
  ])
  const figures = figuresOf(parts, { f_c: '1/(2*pi*R*Ca)' })
  const nominal = 1 / (2 * Math.PI * 1e-5)

  it('moves each part by its coefficient and spread, by designator or entry', () => {
    const [cold, mid, hot] = drift(
      parts,
      figures,
      { R: driftOfPpm(0, 100), C: driftOfPpm(-150, 60) },
      [233.15, 298.15, 358.15],
    )
    // By hand at +60 K: R ±0.6 %, C −0.9 % ± 0.36 %; at −65 K: R ±0.65 %, C +0.975 % ± 0.39 %.
    expect(hot!.figures.f_c!.typical).toAgreeWith(nominal / 0.991, { relative: 1e-12 })
    expect(hot!.figures.f_c!.most).toAgreeWith(nominal / (0.994 * 0.9874), { relative: 1e-12 })
    expect(hot!.figures.f_c!.least).toAgreeWith(nominal / (1.006 * 0.9946), { relative: 1e-12 })
    expect(cold!.figures.f_c!.least).toAgreeWith(nominal / (1.0065 * 1.01365), { relative: 1e-12 })
    expect(mid!.figures.f_c!.least).toAgreeWith(nominal, { relative: 1e-12 })
    expect(hot!.figures.f_c!.mostAt).toEqual({ R: -1, Ca: -1 })
    expect(hot!.method).toBe('all-corners')
  })

  it('refuses a part that would lose all its value', () => {
    expect(() => drift(parts, figures, { R: driftOfPpm(-20_000, 0) }, [398.15])).toThrow(/R would lose all its value/)
  })
})

describe('statistics', () => {
  // Source: numpy.percentile of 1 … 5 and of [15, 20, 35, 40, 50] at 40 % (definition 7; 29 is a textbook value).
  it.each([
    [[1, 2, 3, 4, 5], 50, 3],
    [[1, 2, 3, 4, 5], 5, 1.2],
    [[15, 20, 35, 40, 50], 40, 29],
    [[7], 99, 7],
  ])('interpolates percentiles of %j at %d %%', (sorted, percent, wanted) => {
    expect(percentileOf(Float64Array.from(sorted), percent)).toAgreeWith(wanted, { relative: 1e-12 })
  })

  it.each([0, 1, 2, 3, 20, 1000])('gives the same percentiles of %d values without sorting', (count) => {
    const random = seededRandom(count)
    const values = Float64Array.from({ length: count }, () => Math.round(random() * 300))
    const wanted = percentilesOf(values.slice().sort())
    expect(percentilesInPlace(Float64Array.from([NaN, ...values, NaN]))).toEqual(wanted)
  })

  it('gives mean, deviation and a histogram that holds every build', () => {
    // By hand: 2, 4, 4, 4, 5, 5, 7, 9 has mean 5 and squares 32, so √(32/7).
    const found = sampleStatistics(Float64Array.of(9, 2, 4, NaN, 4, 5, 4, 5, 7), 7)
    expect(found.mean).toBe(5)
    expect(found.standardDeviation).toAgreeWith(Math.sqrt(32 / 7), { relative: 1e-14 })
    expect(found.histogram).toEqual({ from: 2, to: 9, counts: [1, 0, 3, 2, 0, 1, 1] })
    expect(found.undefinedBuilds).toBe(1)
  })

  // Source: R. G. Newcombe, Stat. Med. 17 (1998) 857, score method, four decimals; from memory.
  it.each([
    [81, 263, 0.2553, 0.3662],
    [15, 148, 0.0624, 0.1605],
    [0, 20, 0, 0.1611],
    [1, 29, 0.0061, 0.1718],
  ])('bounds %d of %d as published', (kept, builds, lower, upper) => {
    const share = wilsonShare(kept, builds)
    expect(share.lower).toAgreeWith(lower, { absolute: 6e-5 })
    expect(share.upper).toAgreeWith(upper, { absolute: 6e-5 })
  })

  it('never rounds a yield up to all, and its bounds outwards', () => {
    const text = yieldSentence(wilsonShare(99_999, 100_000), { distribution: 'normal', builds: 100_000, seed: 4 })
    expect(text).toBe(
      '99.99\u2009% of the builds keep all limits, between 99.99\u2009% and 100.00\u2009% with 95\u2009% confidence ' +
        '(Wilson 1927; 100\u2009000 builds, normal with tolerance = 3σ, cut there, seed 4).',
    )
  })
})
