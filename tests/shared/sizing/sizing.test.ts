import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { evaluated, HOUSE_BLOCKS, stageOf, worstErrorOf } from '../../support/stages'
import { bestInverting, bestMultipleFeedback, stockOf } from './brute-force'

const stages = HOUSE_BLOCKS.map(([code]) => stageOf(code))

describe('sized for 2.4 kHz and −2 with half a per cent being good enough', () => {
  const outcome = evaluated(stageOf('lp1-inv'), { targets: { f_c: 2400, K: -2 }, goodEnough: 0.005 })

  it('the inverting low-pass takes 22.1 kΩ, 44.2 kΩ and 1.5 nF', () => {
    // Start of Cf: 1/(2π · 2.4 kHz · 47 kΩ) = 1.41 nF. Of E12 beside it 1.5 nF wants 44.21 kΩ: E96 has 44.2 and 22.1.
    expect(outcome.values).toEqual({ Ri: 22100, Rf: 44200, Cf: 1.5e-9 })
    expect(worstErrorOf(outcome)).toBeLessThan(0.00023)
  })

  it('has runners-up that are other designs, ranked, each with what it costs', () => {
    expect(outcome.runnersUp).toHaveLength(5)
    const capacitors = [outcome.values, ...outcome.runnersUp.map((one) => one.values)].map((one) => one['Cf'])
    expect(new Set(capacitors).size).toBe(6)
    for (const one of outcome.runnersUp) {
      expect(one.worstRelativeError).toBeLessThanOrEqual(0.005)
      expect(one.spread).toBeCloseTo(one.values['Rf']! / one.values['Ri']!, 9)
      expect(one.impedanceOhm).toBeCloseTo(Math.sqrt(one.values['Rf']! * one.values['Ri']!), 6)
    }
  })
})

describe('any sizing', () => {
  const wanted = (k: number) => {
    const { recipe } = stages[k]!
    const names = [...recipe!.targets]
    return fc.tuple(
      fc.array(fc.double({ min: -0.7, max: 0.7, noNaN: true }), { minLength: names.length, maxLength: names.length }),
      fc.array(fc.boolean(), { minLength: names.length, maxLength: names.length }),
    )
  }
  const held = (k: number) =>
    fc.array(fc.option(fc.double({ min: -2, max: 2, noNaN: true }), { freq: 2 }), {
      minLength: stages[k]!.parts.length,
      maxLength: stages[k]!.parts.length,
    })
  const question = fc.nat({ max: stages.length - 1 }).chain((k) => fc.tuple(fc.constant(k), wanted(k), held(k)))

  it('leaves held parts as they are, takes the others from stock, and gives finite figures', () => {
    fc.assert(
      fc.property(question, fc.constantFrom(0, 0.005), ([k, [factors, asked], moves], goodEnough) => {
        const stage = stages[k]!
        const targets = Object.fromEntries(
          [...stage.recipe!.targets].flatMap(([name, value], n) =>
            asked[n] ? [[name, value * 10 ** factors[n]!]] : [],
          ),
        )
        const values = Object.fromEntries(
          stage.parts.flatMap((part, n) => (moves[n] === null ? [] : [[part.name, part.default * 10 ** moves[n]!]])),
        )
        const outcome = evaluated(stage, { values, targets, goodEnough })
        for (const part of stage.parts) {
          const { state, value } = outcome.parts[part.name]!
          expect(outcome.values[part.name]).toBe(value)
          if (Object.hasOwn(values, part.name)) {
            expect(state).toBe('held')
            expect(value).toBe(values[part.name])
          } else if (state !== 'default') expect(stockOf(stage, part.name)).toContain(value)
          else expect(value).toBe(part.default)
        }
        for (const name of Object.keys(targets)) {
          expect(outcome.results[name]!.target).toBe(targets[name])
          if (outcome.infeasible.length === 0) expect(outcome.results[name]!.relativeError).not.toBeNaN()
        }
        for (const one of outcome.infeasible) expect(one.say).toMatch(/\.$/)
      }),
      { numRuns: 60, seed: 20260101 },
    )
  }, 60_000)

  it('comes out the same every time', () => {
    const request = { targets: { f_0: 1234, Q: 0.8, K: -3 } }
    expect(evaluated(stageOf('lp2-mfb'), request)).toEqual(evaluated(stageOf('lp2-mfb'), request))
  })
})

describe('parts held against the recipe', () => {
  it('Rf held: the others meet the targets as well as any of stock do', () => {
    const stage = stageOf('lp1-inv')
    for (const rf of [30.1e3, 47e3, 12.34e3]) {
      const outcome = evaluated(stage, { values: { Rf: rf }, targets: { f_c: 2400, K: -2 } })
      const stock = { Ri: stockOf(stage, 'Ri'), Rf: [rf], Cf: stockOf(stage, 'Cf') }
      expect(worstErrorOf(outcome)).toBeLessThanOrEqual(bestInverting(stock, 2400, -2) + 1e-9)
    }
  })

  it('R1 held in the multiple-feedback low-pass: the other four meet all three targets as well as any of stock do', () => {
    const stage = stageOf('lp2-mfb')
    for (const r1 of [3300, 5000, 12e3]) {
      const outcome = evaluated(stage, { values: { R1: r1 }, targets: { f_0: 1800, Q: 0.9, K: -2 } })
      const stock = Object.fromEntries(stage.parts.map((part) => [part.name, stockOf(stage, part.name)]))
      const best = bestMultipleFeedback(
        { ...(stock as Parameters<typeof bestMultipleFeedback>[0]), R1: [r1] },
        1800,
        0.9,
        -2,
      )
      expect(worstErrorOf(outcome)).toBeLessThanOrEqual(best + 1e-9)
      expect(worstErrorOf(outcome)).toBeLessThan(0.013)
    }
  })

  it('both free capacitors held in the wide band-pass: the resistors still meet the edges', () => {
    const { results, values } = evaluated(stageOf('bp1-wide'), {
      values: { Ci: 220e-9, Cf: 330e-12 },
      targets: { f_1: 70, f_2: 5000 },
    })
    expect([values['Ci'], values['Cf']]).toEqual([220e-9, 330e-12])
    // A step of E96 is 2.4 %, half of it the most that the nearest value is off. IEC 60063.
    for (const name of ['f_1', 'f_2']) expect(Math.abs(results[name]!.relativeError!)).toBeLessThan(0.013)
  })

  it('every part held: nothing is sized, and the errors are shown', () => {
    const outcome = evaluated(stageOf('lp1-inv'), {
      values: { Ri: 10e3, Rf: 10e3, Cf: 1e-9 },
      targets: { f_c: 2400, K: -2 },
    })
    expect(outcome.infeasible).toEqual([])
    expect(outcome.runnersUp).toEqual([])
    expect(outcome.results['K']!.relativeError).toBeCloseTo(0.5, 12)
  })
})

describe('a target that nothing can meet', () => {
  it('does not keep the others from being met', () => {
    // 1/(2π · 1 MΩ · 100 nF) = 1.59 Hz is the least there is.
    const { results, values } = evaluated(stageOf('lp1-inv'), { targets: { f_c: 0.5, K: -3 } })
    expect(values['Rf']! * values['Cf']!).toAgreeWith(0.1, { relative: 1e-9 })
    expect(results['f_c']!.relativeError).toBeCloseTo(1.59155 / 0.5 - 1, 4)
    expect(Math.abs(results['K']!.relativeError!)).toBeLessThan(0.013)
  })

  it.each<[string, Record<string, number>, string, number, RegExp]>([
    ['bp1-wide', { f_1: 1000, f_2: 3000, K_0: -1 }, 'f_2', 5828.5, /The nearest f_2 is 5\.82[89]\skHz\.$/],
    ['lp2-sku', { f_0: 1000, Q: 7 }, 'Q', 5, /The nearest Q is 5(\.000)?\.$/],
    ['lp2-mfb', { f_0: 1000, Q: 9, K: -1 }, 'Q', 8, /The nearest Q is 8(\.000)?\.$/],
    ['lp1-ni', { f_c: 1000, K: 1 }, 'K', 1.01, /The nearest gain is 1\.010?\.$/],
    ['lp1-ni', { f_c: 1000, K: 0.5 }, 'K', 1.01, /The nearest gain is 1\.010?\.$/],
  ])('%s %o names the nearest', (code, targets, target, nearest, sentence) => {
    const outcome = evaluated(stageOf(code), { targets })
    expect(outcome.infeasible).toHaveLength(1)
    expect(outcome.infeasible[0]).toMatchObject({ target })
    expect(outcome.infeasible[0]!.nearest).toAgreeWith(nearest, { relative: 1e-9 })
    expect(outcome.infeasible[0]!.say).toMatch(sentence)
  })

  it('leads to the nearest set, not to the defaults', () => {
    const sized = evaluated(stageOf('bp1-wide'), { targets: { f_1: 1000, f_2: 3000 } })
    expect(Object.values(sized.parts).map((part) => part.state)).toEqual(['solved', 'free', 'solved', 'free'])
    // Real poles at best equal: f_2/f_1 is (√2 + 1)/(√2 − 1) = 5.83, so the worst error is balanced at
    // x with (1 + x)/(1 − x) = 5.83/3, x = 0.32.
    expect(worstErrorOf(sized)).toBeGreaterThan(0.31)
    expect(worstErrorOf(sized)).toBeLessThan(0.34)
    const unity = evaluated(stageOf('lp1-ni'), { targets: { f_c: 1000, K: 1 } })
    expect(unity.parts['Rf']!.state).toBe('solved')
    // The least gain of stock: 1 + 100 Ω/20 kΩ.
    expect(unity.results['K']!.value).toBeCloseTo(1.005, 9)
  })
})

describe('a target that is not asked', () => {
  it('keeps what stands in for it', () => {
    const { results } = evaluated(stageOf('lp1-inv'), { targets: { K: -5 } })
    expect(results['K']!.relativeError).toBeCloseTo(0, 9)
    expect(results['f_c']!.target).toBeUndefined()
    expect(results['f_c']!.value).toBeGreaterThan(2400 / 1.2)
    expect(results['f_c']!.value).toBeLessThan(2400 * 1.2)
  })
})
