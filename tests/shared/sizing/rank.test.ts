import { describe, expect, it } from 'vitest'
import type { RankedSet } from '#shared/sizing/rank'
import { compareSets, insideHouse, levelAndSpread } from '#shared/sizing/rank'

const set = (more: Partial<RankedSet> = {}): RankedSet => ({
  values: new Map([
    [0, 10e3],
    [1, 20e3],
  ]),
  worstError: 0.001,
  errors: [more.worstError ?? 0.001, 0],
  impedanceOhm: 14e3,
  spread: 2,
  outside: 0,
  offStandIn: 0,
  farFromStart: 0,
  ...more,
})
const before = (a: Partial<RankedSet>, b: Partial<RankedSet>, goodEnough = 0) => {
  const order = Math.sign(compareSets(set(a), set(b), goodEnough))
  expect(Math.sign(compareSets(set(b), set(a), goodEnough))).toBe(-order || 0)
  return order === -1
}

describe('compareSets', () => {
  it('puts the smaller worst error first, whatever the house rules say', () => {
    expect(before({ worstError: 0.001, spread: 500, outside: 9 }, { worstError: 0.0010001 })).toBe(true)
  })

  it('takes errors nearer than 1e-9 as equal', () => {
    expect(before({ worstError: 0.001 + 9e-10, spread: 2 }, { worstError: 0.001, spread: 50 })).toBe(true)
    expect(before({ worstError: 0.001 + 2e-9, spread: 2 }, { worstError: 0.001, spread: 50 })).toBe(false)
  })

  it('takes errors within good enough as equal, those beyond not', () => {
    expect(before({ worstError: 0.004, spread: 2 }, { worstError: 0.001, spread: 50 }, 0.005)).toBe(true)
    expect(before({ worstError: 0.006, spread: 2 }, { worstError: 0.001, spread: 50 }, 0.005)).toBe(false)
  })

  it('then goes by the targets not asked, the house range, the start, the spread, in this order', () => {
    expect(before({ outside: 5, farFromStart: 5, spread: 90 }, { offStandIn: 1 })).toBe(true)
    expect(before({ farFromStart: 5, spread: 90 }, { outside: 1 })).toBe(true)
    expect(before({ spread: 90 }, { farFromStart: 1 })).toBe(true)
    expect(before({ spread: 2 }, { spread: 4 })).toBe(true)
  })

  it('lets the smaller error decide where the house rules do not, then ascending values', () => {
    expect(before({ worstError: 0.001, spread: 2.02 }, { worstError: 0.004, spread: 2 }, 0.005)).toBe(true)
    expect(
      before(
        { values: new Map([[0, 10e3], [1, 20e3]]) }, // prettier-ignore
        { values: new Map([[0, 10e3], [1, 22e3]]) }, // prettier-ignore
      ),
    ).toBe(true)
    expect(compareSets(set(), set(), 0)).toBe(0)
  })

  it('looks at the next error where a target is out of reach', () => {
    expect(before({ worstError: 0.3, errors: [0.3, 0.001], spread: 50 }, { worstError: 0.3, errors: [0.3, 0.2] })).toBe(
      true,
    )
    expect(before({ errors: [0.001, 0.0009], spread: 2 }, { errors: [0.001, 0], spread: 50 })).toBe(true)
  })

  it('is an order: sorting any mixture gives one result', () => {
    const sets = [0.1, 0.004, 0.0041, 0.002, 0.3].flatMap((worstError) =>
      [1, 3, 30].map((spread) => set({ worstError, errors: [worstError, 0], spread })),
    )
    const sorted = (of: RankedSet[]) => [...of].sort((a, b) => compareSets(a, b, 0.005))
    expect(sorted([...sets].reverse())).toEqual(sorted(sets))
  })
})

describe('levelAndSpread', () => {
  const parts = [
    { slot: 0, stock: [], kind: 'resistor' as const },
    { slot: 1, stock: [], kind: 'resistor' as const },
    { slot: 2, stock: [], kind: 'capacitor' as const },
  ]
  const of = (...values: number[]) => levelAndSpread(parts, (slot) => values[slot]!)

  it('gives the geometric mean of the resistors and the larger spread of a kind', () => {
    expect(of(10e3, 40e3, 1e-9).impedanceOhm).toBeCloseTo(20e3, 6)
    expect(of(10e3, 40e3, 1e-9).spread).toBeCloseTo(4, 12)
  })

  it('is inside from 1 kΩ to 200 kΩ and from 100 pF, outside beyond', () => {
    expect(of(1e3, 200e3, 100e-12).outside).toBe(0)
    for (const values of [
      [500, 10e3, 1e-9],
      [10e3, 800e3, 1e-9],
      [10e3, 10e3, 47e-12],
    ])
      // prettier-ignore
      expect(insideHouse(set({ ...of(...values) }))).toBe(false)
  })
})
