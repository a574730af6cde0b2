import { describe, expect, it } from 'vitest'
import { ProblemError } from '#shared/problems'
import type { PassBand } from '#shared/prototypes/dynamic-range'
import { orderForDynamicRange } from '#shared/prototypes/dynamic-range'
import { lowPassPrototype } from '#shared/prototypes/prototype'
import type { Section } from '#shared/prototypes/sections'
import { pairZeros, sectionMagnitude, sectionsOf } from '#shared/prototypes/sections'
import { toBandPass, toBandStop, toHighPass } from '#shared/prototypes/transformation'

const second = (omega0: number, q: number): Section => ({ order: 2, omega0, q, zerosAtOrigin: 0 })
const onAxis = (...omegas: number[]) =>
  omegas.flatMap((im) => [
    { re: 0, im },
    { re: 0, im: -im },
  ])
const originZeros = (sections: readonly Section[]) => sections.map(({ zerosAtOrigin }) => zerosAtOrigin)
const notches = (sections: readonly Section[]) =>
  sections.map((section) => (section.order === 2 ? section.omegaZ : undefined))

describe('pairing of zeros', () => {
  it('serves the highest Q first, with the nearest zero in ratio', () => {
    const paired = pairZeros([second(1.1, 2), second(1, 9), second(0.5, 0.7)], onAxis(1.05, 3, 1.4))
    expect(notches(paired)).toEqual([1.4, 1.05, 3])
  })

  it('fills every section of a high-pass with zeros at the origin', () => {
    const filter = toHighPass(lowPassPrototype({ family: 'butterworth', order: 5 }), 1000)
    expect(originZeros(sectionsOf(filter))).toEqual([1, 2, 2])
  })

  it('gives one zero at the origin to each section of an all-pole band-pass', () => {
    const filter = toBandPass(lowPassPrototype({ family: 'bessel', order: 4 }), { lowerHz: 1, upperHz: 2 })
    expect(originZeros(sectionsOf(filter))).toEqual([1, 1, 1, 1])
  })

  it('gives the notch frequency to each section of an all-pole band-stop', () => {
    const filter = toBandStop(lowPassPrototype({ family: 'butterworth', order: 3 }), { lowerHz: 40, upperHz: 62.5 })
    expect(notches(sectionsOf(filter)).map((x) => x! / (2 * Math.PI))).toAgreeWith([50, 50, 50], { relative: 1e-12 })
  })

  it('leaves the zero at the origin of an elliptic band-pass of odd order to the section without a notch', () => {
    const prototype = lowPassPrototype({ family: 'elliptic', order: 3, rippleDb: 1, stopDb: 40 })
    const sections = sectionsOf(toBandPass(prototype, { lowerHz: 900, upperHz: 1100 }))
    expect(originZeros(sections)).toEqual([1, 0, 0])
    expect(notches(sections).filter((x) => x !== undefined).length).toBe(2)
  })

  it.each([
    ['a zero off the axis', [second(1, 1)], [{ re: 1, im: 0 }]],
    ['more notches than sections', [second(1, 1)], onAxis(1, 2)],
    ['more zeros at the origin than poles', [second(1, 1)], [0, 0, 0].map((re) => ({ re, im: 0 }))],
  ])('refuses %s', (_, sections, zeros) => {
    expect(() => pairZeros(sections, zeros)).toThrow(ProblemError)
  })
})

describe('sections', () => {
  it('refuse an unstable filter', () => {
    expect(() => sectionsOf({ zeros: [], poles: [{ re: 0, im: 0 }], gain: 1 })).toThrow(ProblemError)
  })

  it('take the real poles of a wide band-pass in a pair about the centre', () => {
    const wide = toBandPass(lowPassPrototype({ family: 'butterworth', order: 1 }), { lowerHz: 1, upperHz: 100 })
    const [only, ...others] = sectionsOf(wide)
    expect(others).toEqual([])
    expect(only!.omega0).toAgreeWith(2 * Math.PI * 10, { relative: 1e-12 })
    // Q = ω_0/B.
    expect(only!.order === 2 && only!.q).toAgreeWith(10 / 99, { relative: 1e-12 })
  })
})

/** Worst ratio, over the partial cascades, of the largest value anywhere to the smallest in the bands; its own grid. */
function worstSpread(sections: readonly Section[], bands: readonly PassBand[], from: number, to: number) {
  const grid = Array.from({ length: 1500 }, (_, i) => from * (to / from) ** (i / 1499))
  const partial = grid.map(() => 1)
  return sections.reduce((worst, section) => {
    grid.forEach((omega, i) => (partial[i]! *= sectionMagnitude(section, omega)))
    const inBand = partial.filter((_, i) =>
      bands.some((band) => grid[i]! >= band.fromRadPerSec && grid[i]! <= band.toRadPerSec),
    )
    return Math.max(worst, Math.max(...partial) / Math.min(...inBand))
  }, 1)
}
const permutations = <T>(items: readonly T[]): T[][] =>
  items.length === 0
    ? [[]]
    : items.flatMap((item, i) =>
        permutations([...items.slice(0, i), ...items.slice(i + 1)]).map((rest) => [item, ...rest]),
      )

describe('order for dynamic range', () => {
  const elliptic = lowPassPrototype({ family: 'elliptic', order: 9, rippleDb: 0.1, stopDb: 60 })
  const bandPass = toBandPass(lowPassPrototype({ family: 'chebyshev1', order: 4, rippleDb: 1 }), {
    lowerHz: 0.1,
    upperHz: 0.15,
  })
  it.each([
    ['low-pass', sectionsOf(elliptic), [{ fromRadPerSec: 0, toRadPerSec: 1 }]],
    ['band-pass', sectionsOf(bandPass), [{ fromRadPerSec: 0.2 * Math.PI, toRadPerSec: 0.3 * Math.PI }]],
  ])('of a %s is not beaten by any other order', (_, sections, bands) => {
    const ordered = orderForDynamicRange(sections, bands)
    expect(new Set(ordered)).toEqual(new Set(sections))
    const found = worstSpread(ordered, bands, 1e-2, 1e2)
    for (const other of permutations(sections)) expect(found).toBeLessThan(worstSpread(other, bands, 1e-2, 1e2) * 1.01)
  })

  it('of a Butterworth of order 6 lets the partial responses fall no deeper than the last, √2', () => {
    // By hand at 1 rad/s, where each section gives its Q: Q 0.52 first would fall to 0.52, Q 1.93 first rise to 2.
    const sections = sectionsOf(lowPassPrototype({ family: 'butterworth', order: 6 }))
    const ordered = orderForDynamicRange(sections, [{ fromRadPerSec: 0, toRadPerSec: 1 }])
    const qs = ordered.map((section) => (section.order === 2 ? section.q : 0))
    expect(qs).toAgreeWith([Math.SQRT1_2, 1.93185165, 0.51763809], { relative: 1e-8 })
  })

  it('takes both pass bands of a band-stop, and more than ten sections', () => {
    const filter = toBandStop(lowPassPrototype({ family: 'elliptic', order: 12, rippleDb: 0.5, stopDb: 60 }), {
      lowerHz: 40,
      upperHz: 60,
    })
    const sections = sectionsOf(filter)
    const bands = [
      { fromRadPerSec: 0, toRadPerSec: 80 * Math.PI },
      { fromRadPerSec: 120 * Math.PI, toRadPerSec: Infinity },
    ]
    const ordered = orderForDynamicRange(sections, bands)
    expect(new Set(ordered)).toEqual(new Set(sections))
    expect(worstSpread(ordered, bands, 1, 1e5)).toBeLessThan(worstSpread(sections, bands, 1, 1e5) * 1.01)
  })
})
