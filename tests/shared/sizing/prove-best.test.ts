import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { proveBest } from '#shared/sizing/prove-best'
import type { SearchPart, SearchTarget } from '#shared/sizing/recipe'
import { searchOrder } from '#shared/sizing/search-order'
import { bothSides, firstAtLeast, oneSided } from '#shared/sizing/stock-places'
import { trendOf } from '#shared/sizing/trend'

const twelve = [1, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2] // IEC 60063, E12
const part = (slot: number, stock = twelve): SearchPart => ({ slot, stock, kind: 'resistor' })
const target = (value: number, uses: number[], formula: (v: Float64Array) => number): SearchTarget => ({
  slot: 9,
  value,
  asked: true,
  formula,
  uses: new Set(uses),
})

/** Formulas that rise, fall, do both, are powers and are none. */
const FORMULAS: [string, (v: Float64Array) => number, number[]][] = [
  ['product', (v) => v[0]! * v[1]!, [0, 1]],
  ['ratio', (v) => v[0]! / (v[1]! * v[2]!), [0, 1, 2]],
  ['root', (v) => Math.sqrt(v[1]! * v[2]!), [1, 2]],
  ['sum', (v) => 1 + v[0]! / v[2]!, [0, 2]],
  ['unimodal', (v) => Math.sqrt(v[0]! * v[1]!) / (v[2]! * (v[0]! + v[1]!)), [0, 1, 2]],
  ['difference', (v) => 3 + v[0]! - v[1]!, [0, 1]],
  ['undefined in part', (v) => Math.sqrt(v[0]! - v[1]!), [0, 1]],
]

describe('proveBest', () => {
  const parts = [part(0), part(1), part(2)]
  const errorOf = (targets: SearchTarget[], env: Float64Array) =>
    Math.max(...targets.map((one) => Math.abs(one.formula(env) / one.value - 1)))

  it('finds the smallest worst error that brute force finds, for any formulas and targets', () => {
    const question = fc.array(
      fc.tuple(fc.nat({ max: FORMULAS.length - 1 }), fc.double({ min: 0.2, max: 20, noNaN: true })),
      {
        minLength: 1,
        maxLength: 3,
      },
    )
    fc.assert(
      fc.property(question, (asked) => {
        const targets = asked.map(([k, value]) => target(value, FORMULAS[k]![2], FORMULAS[k]![1]))
        const env = Float64Array.from({ length: 10 }, () => 3.3)
        let brute = Infinity
        for (const a of twelve)
          for (const b of twelve)
            for (const c of twelve) {
              const error = errorOf(targets, Float64Array.of(a, b, c))
              if (error < brute) brute = error
            }
        let best = Infinity
        const done = proveBest(parts, targets, env, 100, 0, (values) => {
          const error = errorOf(targets, Float64Array.of(values.get(0)!, values.get(1)!, values.get(2)!))
          best = Math.min(best, error)
          return error
        })
        expect(done).toBe(true)
        if (brute <= 100) expect(best).toBeLessThanOrEqual(brute + 1e-9)
      }),
      { numRuns: 150, seed: 7 },
    )
  })

  it('says when it had to give up', () => {
    const wide = Array.from({ length: 13 }, (_, slot) => part(slot))
    const all = target(1, [...wide.keys()], (v) => v.slice(0, 13).reduce((a, b) => a * b))
    expect(proveBest(wide, [all], new Float64Array(20).fill(1), 0.1, 0, () => 0)).toBe(false)
    expect(proveBest([part(0, [])], [all], new Float64Array(20).fill(1), 0.1, 0, () => 0)).toBe(false)
  })
})

describe('trendOf', () => {
  const parts = [part(0), part(1), part(2)]
  const trends = (k: number) => parts.map((one) => trendOf(FORMULAS[k]![1], one, parts, new Float64Array(3).fill(2)))

  it('tells powers with their exponent', () => {
    expect(trends(0).map((one) => one.sign).slice(0, 2)).toEqual([1, 1]) // prettier-ignore
    expect(trends(1).map((one) => one.exponent)).toEqual([
      expect.closeTo(1, 9),
      expect.closeTo(-1, 9),
      expect.closeTo(-1, 9),
    ])
    expect(trends(2)[2]!.exponent).toBeCloseTo(0.5, 9)
  })

  it('tells what only rises or falls, and what does neither', () => {
    expect(trends(3)).toMatchObject([{ sign: 1, exponent: null }, {}, { sign: -1, exponent: null }])
    expect(trends(4).map((one) => one.sign)).toEqual([0, 0, -1])
    expect(trends(6)[0]!.sign).toBe(0)
  })

  it('leaves the vector as it was', () => {
    const env = new Float64Array(3).fill(2)
    trendOf(FORMULAS[1]![1], parts[0]!, parts, env)
    expect([...env]).toEqual([2, 2, 2])
  })
})

describe('searchOrder', () => {
  it('puts parts together that one target ties', () => {
    const tie = { sign: 1 as const, exponent: 1 }
    const order = searchOrder({
      counts: [100, 100, 100, 100],
      trends: [
        [tie, null, tie, null],
        [null, tie, null, tie],
      ],
      spans: [
        [5, 0, 5, 0],
        [0, 5, 0, 5],
      ],
      bound: 0.001,
    })
    expect([[0, 2], [1, 3]]).toContainEqual([...order.slice(0, 2)].sort()) // prettier-ignore
  })
})

describe('places in stock', () => {
  it('are found though a value differs in the last digits', () => {
    expect(firstAtLeast(twelve, 4.7 * (1 + 1e-13))).toBe(8)
    expect(firstAtLeast(twelve, 4.7 * (1 + 1e-9))).toBe(9)
    expect(firstAtLeast(twelve, 9)).toBe(12)
    expect(firstAtLeast([], 9)).toBe(0)
  })

  it('on both sides or on one end at the ends of the stock', () => {
    expect(bothSides(twelve, 2, 1)).toEqual([1.8, 2.2])
    expect(bothSides(twelve, 100, 2)).toEqual([6.8, 8.2])
    expect(bothSides(twelve, 0.1, 2)).toEqual([1, 1.2])
    expect(oneSided(twelve, 4.7, 2, 'up')).toEqual([4.7, 5.6])
    expect(oneSided(twelve, 4.7, 2, 'down')).toEqual([4.7, 3.9])
    expect(oneSided(twelve, 4.8, 2, 'down')).toEqual([4.7, 3.9])
    expect(oneSided(twelve, 100, 2, 'up')).toEqual([])
  })
})
