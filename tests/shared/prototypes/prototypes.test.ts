import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { Complex } from '#shared/numerics/complex'
import { ProblemError } from '#shared/problems'
import type { Normalisation, PrototypeFamily, PrototypeRequest } from '#shared/prototypes/prototype'
import {
  FAMILY_NORMALISATIONS,
  HALF_POWER_DB,
  lowPassPrototype,
  PROTOTYPE_FAMILIES,
} from '#shared/prototypes/prototype'
import type { Section } from '#shared/prototypes/sections'
import { sectionsOf } from '#shared/prototypes/sections'
import { dcGain, magnitudeAt } from '#shared/prototypes/zero-pole-gain'
import { complexOf, setDistance } from '../../support/circuits'
import type { CheckVector } from '../../support/circuits'

interface PrototypeCheck {
  family: PrototypeFamily
  order: number
  normalisation: Normalisation
  ripple_dB?: number
  stop_dB?: number
  poles: CheckVector
  zeros: CheckVector
  gain: number
  dc_gain: number
  sections?: { order: 1 | 2; omega0: number; Q?: number; omega_z?: number }[]
  H_at: { omega: number[]; mag_dB: number[] }
  omega_3dB?: number
  group_delay_at_dc?: number
}
const checks = (file: string) =>
  (
    JSON.parse(readFileSync(new URL(`../../checks/${file}`, import.meta.url), 'utf8')) as {
      prototypes: PrototypeCheck[]
    }
  ).prototypes
const requestOf = (check: PrototypeCheck): PrototypeRequest => ({
  family: check.family,
  order: check.order,
  normalisation: check.normalisation,
  ...(check.ripple_dB === undefined ? {} : { rippleDb: check.ripple_dB }),
  ...(check.stop_dB === undefined ? {} : { stopDb: check.stop_dB }),
})
const titled = (file: string) =>
  checks(file).map((check) => {
    const loss = [check.ripple_dB, check.stop_dB].filter((x) => x !== undefined).map((x) => `, ${x} dB`)
    return [`${check.family} of order ${check.order}${loss.join('')}, ${check.normalisation}`, check] as const
  })
const decibels = (magnitude: number) => 20 * Math.log10(magnitude)
/** Sections as points (ω_0, Q), so that they compare as a set; a first-order one has the Q 0. */
const asPoints = (sections: { order: 1 | 2; omega0: number; q?: number }[]): Complex[] =>
  sections.map(({ omega0, q }) => ({ re: omega0, im: q ?? 0 }))
const zeroFrequencies = (sections: readonly Section[]) =>
  sections
    .flatMap((section) => (section.order === 2 && section.omegaZ !== undefined ? [section.omegaZ] : []))
    .sort((a, b) => a - b)

// Source: scipy.signal butter, cheby1, cheby2, bessel, cross-checked by the textbook formulas, as the header says; its
// tolerance is 1e-8 relative for poles, zeros, ω0 and Q, 1e-6 dB above −100 dB.
describe.each(titled('prototypes.json'))('%s', (_, check) => {
  const filter = lowPassPrototype(requestOf(check))

  it('has the poles, zeros and gains of the outside figures', () => {
    expectFilter(check)
  })

  it('has the sections of the outside figures, by ascending Q', () => {
    const sections = sectionsOf(filter)
    const wanted = check.sections!
    const points = asPoints(
      wanted.map(({ order, omega0, Q }) => ({ order, omega0, ...(Q === undefined ? {} : { q: Q }) })),
    )
    expect(setDistance(asPoints(sections), points)).toBeLessThan(1e-8)
    sections.forEach((section, i) => {
      expect(section.order).toBe(wanted[i]!.order)
      expect(section.omega0).toAgreeWith(wanted[i]!.omega0, { relative: 1e-8 })
      if (section.order === 2) expect(section.q).toAgreeWith(wanted[i]!.Q!, { relative: 1e-8 })
    })
    const zeros = wanted.flatMap(({ omega_z }) => (omega_z === undefined ? [] : [omega_z])).sort((a, b) => a - b)
    expect(zeroFrequencies(sections).length).toBe(zeros.length)
    if (zeros.length) expect(zeroFrequencies(sections)).toAgreeWith(zeros, { relative: 1e-8 })
  })
})

it.each(titled('prototypes.json').filter(([, check]) => check.omega_3dB !== undefined))(
  '%s has the half-power frequency and the delay at DC of the outside figures',
  (_, check) => {
    const filter = lowPassPrototype(requestOf(check))
    expect(magnitudeAt(filter, check.omega_3dB!)).toAgreeWith(Math.SQRT1_2, { relative: 1e-8 })
    const delaySec = filter.poles.reduce((sum, { re, im }) => sum - re / (re * re + im * im), 0)
    expect(delaySec).toAgreeWith(check.group_delay_at_dc!, { relative: 1e-8 })
  },
)

// Source: scipy.signal ellip, butter, cheby1, cheby2, bessel; Linkwitz–Riley from scipy.signal.butter squared; where the
// edges nearly meet, theta functions of mpmath in 60 digits; as the header says.
it.each(titled('prototypes-beyond.json'))('%s has the poles, zeros and gains of the outside figures', (_, check) => {
  expectFilter(check)
})

function expectFilter(check: PrototypeCheck) {
  const filter = lowPassPrototype(requestOf(check))
  expect(filter.poles.length).toBe(check.poles.re.length)
  expect(setDistance(filter.poles, complexOf(check.poles))).toBeLessThan(1e-8)
  expect(filter.zeros.length).toBe(check.zeros.re.length)
  if (filter.zeros.length) expect(setDistance(filter.zeros, complexOf(check.zeros))).toBeLessThan(1e-8)
  expect(filter.gain).toAgreeWith(check.gain, { relative: 1e-8 })
  expect(dcGain(filter)).toAgreeWith(check.dc_gain, { relative: 1e-8 })
  check.H_at.omega.forEach((omega, i) => {
    const wantedDb = check.H_at.mag_dB[i]!
    if (wantedDb > -100) expect(decibels(magnitudeAt(filter, omega))).toAgreeWith(wantedDb, { absolute: 1e-6 })
    else expect(decibels(magnitudeAt(filter, omega))).toBeLessThan(-99.9)
  })
}

describe('every family at every order', () => {
  const all = PROTOTYPE_FAMILIES.flatMap((family) =>
    FAMILY_NORMALISATIONS[family].flatMap((normalisation) =>
      Array.from({ length: 20 }, (_, i) => i + 1)
        .filter((order) => family !== 'linkwitz-riley' || order % 2 === 0)
        .map((order) => ({ family, order, normalisation, rippleDb: 0.2, stopDb: 45 })),
    ),
  )
  it('is stable, of its order, with real coefficients', () => {
    for (const request of all) {
      const { poles, zeros } = lowPassPrototype(request)
      expect(poles.length).toBe(request.order)
      expect(poles.every(({ re }) => re < 0)).toBe(true)
      for (const roots of [poles, zeros])
        for (const { re, im } of roots)
          expect(roots.some((other) => (other.re === re && other.im === -im) || (im === 0 && other.im === 0))).toBe(
            true,
          )
    }
  })

  it('passes its named edge at 1 rad/s', () => {
    const lossDb: Partial<Record<Normalisation, (request: PrototypeRequest) => number>> = {
      'half-power at 1 rad/s': () => HALF_POWER_DB,
      'half-amplitude at 1 rad/s': () => decibels(2),
      'ripple edge at 1 rad/s': ({ rippleDb }) => rippleDb!,
      'stop-band edge at 1 rad/s': ({ stopDb }) => stopDb!,
    }
    for (const request of all) {
      const loss = lossDb[request.normalisation]?.(request)
      if (loss !== undefined)
        expect(decibels(magnitudeAt(lowPassPrototype(request), 1))).toAgreeWith(-loss, { absolute: 1e-9 })
    }
  })
})

describe('elliptic', () => {
  it.each([
    [5, 0.1, 40],
    [8, 1, 80],
    [13, 0.05, 90],
    [4, 6, 25],
  ])('of order %d keeps %d dB of ripple and %d dB of stop-band loss', (order, rippleDb, stopDb) => {
    const filter = lowPassPrototype({ family: 'elliptic', order, rippleDb, stopDb })
    const stop = lowPassPrototype({
      family: 'elliptic',
      order,
      rippleDb,
      stopDb,
      normalisation: 'stop-band edge at 1 rad/s',
    })
    for (let i = 0; i <= 2000; i++) {
      const pass = decibels(magnitudeAt(filter, i / 2000))
      expect(pass).toBeLessThan(1e-9)
      expect(pass).toBeGreaterThan(-rippleDb - 1e-9)
      expect(decibels(magnitudeAt(stop, 10 ** (i / 500)))).toBeLessThan(-stopDb + 1e-6)
    }
  })

  it('with a ripple deeper than half power falls through half power for the last time at 1 rad/s', () => {
    const filter = lowPassPrototype({
      family: 'elliptic',
      order: 5,
      rippleDb: 5,
      stopDb: 40,
      normalisation: 'half-power at 1 rad/s',
    })
    expect(magnitudeAt(filter, 1)).toAgreeWith(Math.SQRT1_2, { relative: 1e-10 })
    for (let x = 1.0001; x < 3; x += 1e-3) expect(magnitudeAt(filter, x)).toBeLessThan(Math.SQRT1_2)
  })
})

describe('Linkwitz–Riley', () => {
  it('sums with the high-pass of the same crossover to an all-pass', () => {
    // Source: Linkwitz 1976, from memory: |L + H| = 1 with the high-pass inverted at orders 2, 6, 10.
    for (const order of [2, 4, 6, 8]) {
      const { poles } = lowPassPrototype({ family: 'linkwitz-riley', order })
      for (const omega of [0.3, 1, 2.7]) {
        const sum = poles.reduce((below, { re, im }) => below * Math.hypot(re, omega - im), 1)
        expect((1 + omega ** order) / sum).toAgreeWith(1, { relative: 1e-12 })
      }
    }
  })

  it('has sections of Q 0.5 where the halves have a real pole', () => {
    const sections = sectionsOf(lowPassPrototype({ family: 'linkwitz-riley', order: 6 }))
    expect(sections.map((section) => (section.order === 2 ? section.q : 0))).toAgreeWith([0.5, 1, 1], {
      relative: 1e-12,
    })
  })
})

describe('requests that make no prototype', () => {
  it.each<[string, PrototypeRequest, string]>([
    ['order 0', { family: 'butterworth', order: 0 }, '#/order'],
    ['order 21', { family: 'bessel', order: 21 }, '#/order'],
    ['order 2.5', { family: 'butterworth', order: 2.5 }, '#/order'],
    ['order NaN', { family: 'butterworth', order: NaN }, '#/order'],
    ['odd Linkwitz–Riley', { family: 'linkwitz-riley', order: 3 }, '#/order'],
    ['no ripple', { family: 'chebyshev1', order: 3 }, '#/rippleDb'],
    ['negative ripple', { family: 'chebyshev1', order: 3, rippleDb: -1 }, '#/rippleDb'],
    ['infinite stop', { family: 'chebyshev2', order: 3, stopDb: Infinity }, '#/stopDb'],
    ['stop below ripple', { family: 'elliptic', order: 3, rippleDb: 3, stopDb: 2 }, '#/stopDb'],
    [
      'half power never reached',
      { family: 'chebyshev2', order: 3, stopDb: 2, normalisation: 'half-power at 1 rad/s' },
      '#/stopDb',
    ],
    [
      'a normalisation of another family',
      { family: 'butterworth', order: 3, normalisation: 'unit group delay at DC' },
      '#/normalisation',
    ],
  ])('%s', (_, request, pointer) => {
    const run = () => lowPassPrototype(request)
    expect(run).toThrow(ProblemError)
    expect(run).toThrow(
      expect.objectContaining({ code: 'value-out-of-range', problems: [expect.objectContaining({ pointer })] }),
    )
  })
})
