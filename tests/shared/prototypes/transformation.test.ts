import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { ProblemError } from '#shared/problems'
import type { PrototypeFamily } from '#shared/prototypes/prototype'
import { lowPassPrototype } from '#shared/prototypes/prototype'
import { sectionMagnitude, sectionsOf } from '#shared/prototypes/sections'
import { toBandPass, toBandStop, toHighPass, toLowPass } from '#shared/prototypes/transformation'
import type { ZeroPoleGain } from '#shared/prototypes/zero-pole-gain'
import { magnitudeAt } from '#shared/prototypes/zero-pole-gain'
import { complexOf, setDistance } from '../../support/circuits'
import type { CheckVector } from '../../support/circuits'

interface TransformedCheck {
  family: PrototypeFamily
  order: number
  ripple_dB?: number
  stop_dB?: number
  type: 'low-pass' | 'high-pass' | 'band-pass' | 'band-stop'
  edges_Hz: number | [number, number]
  poles: CheckVector
  zeros: CheckVector
  gain: number
  H_at: { frequency_Hz: number[]; mag_dB: number[] }
}
const { transformed } = JSON.parse(
  readFileSync(new URL('../../checks/prototypes-beyond.json', import.meta.url), 'utf8'),
) as { transformed: TransformedCheck[] }

function filterOf({ family, order, ripple_dB, stop_dB, type, edges_Hz }: TransformedCheck): ZeroPoleGain {
  const prototype = lowPassPrototype({
    family,
    order,
    ...(ripple_dB === undefined ? {} : { rippleDb: ripple_dB }),
    ...(stop_dB === undefined ? {} : { stopDb: stop_dB }),
  })
  const [first, second] = [edges_Hz].flat()
  if (type === 'low-pass') return toLowPass(prototype, first!)
  if (type === 'high-pass') return toHighPass(prototype, first!)
  const band = { lowerHz: first!, upperHz: second! }
  return type === 'band-pass' ? toBandPass(prototype, band) : toBandStop(prototype, band)
}
const titled = transformed.map(
  (check) => [`${check.family} of order ${check.order} as ${check.type} at ${check.edges_Hz} Hz`, check] as const,
)

// Source: scipy.signal lp2lp_zpk, lp2hp_zpk, lp2bp_zpk, lp2bs_zpk of prototypes of scipy.signal; tolerance 1e-8 relative,
// 1e-6 dB above −100 dB, as the header says.
describe.each(titled)('%s', (_, check) => {
  const filter = filterOf(check)

  it('has the zeros, poles, gain and response of the outside figures', () => {
    expect(setDistance(filter.poles, complexOf(check.poles))).toBeLessThan(1e-8)
    expect(filter.zeros.length).toBe(check.zeros.re.length)
    if (filter.zeros.length) expect(setDistance(filter.zeros, complexOf(check.zeros))).toBeLessThan(1e-8)
    expect(filter.gain).toAgreeWith(check.gain, { relative: 1e-8 })
    check.H_at.frequency_Hz.forEach((hz, i) => {
      const gotDb = 20 * Math.log10(magnitudeAt(filter, 2 * Math.PI * hz))
      if (check.H_at.mag_dB[i]! > -100) expect(gotDb).toAgreeWith(check.H_at.mag_dB[i]!, { absolute: 1e-6 })
      else expect(gotDb).toBeLessThan(-99.9)
    })
  })

  it('is the product of its sections and its gain', () => {
    const sections = sectionsOf(filter)
    expect(sections.reduce((sum, { order }) => sum + order, 0)).toBe(filter.poles.length)
    for (const hz of check.H_at.frequency_Hz) {
      const omega = 2 * Math.PI * hz
      const product = sections.reduce((h, section) => h * sectionMagnitude(section, omega), Math.abs(filter.gain))
      expect(product).toAgreeWith(magnitudeAt(filter, omega), { relative: 1e-9, absolute: 1e-12 })
    }
  })
})

describe('frequency transformations', () => {
  const prototype = lowPassPrototype({ family: 'chebyshev1', order: 4, rippleDb: 1 })

  it('bring the value at 1 rad/s to the edges', () => {
    const edge = 10 ** (-1 / 20)
    const at = (filter: ZeroPoleGain, hz: number) => magnitudeAt(filter, 2 * Math.PI * hz)
    expect(at(toLowPass(prototype, 2e6), 2e6)).toAgreeWith(edge, { relative: 1e-10 })
    expect(at(toHighPass(prototype, 0.1), 0.1)).toAgreeWith(edge, { relative: 1e-10 })
    for (const hz of [300, 3400]) {
      expect(at(toBandPass(prototype, { lowerHz: 300, upperHz: 3400 }), hz)).toAgreeWith(edge, { relative: 1e-10 })
      expect(at(toBandStop(prototype, { lowerHz: 300, upperHz: 3400 }), hz)).toAgreeWith(edge, { relative: 1e-10 })
    }
  })

  it('keep the product of a band pole and its partner at ω_0², at a bandwidth of a millionth too', () => {
    const { poles } = toBandPass(lowPassPrototype({ family: 'butterworth', order: 1 }), {
      lowerHz: 1e6 - 0.5,
      upperHz: 1e6 + 0.5,
    })
    // H = B s/(s² + B s + ω_0²): the real part is −B/2.
    expect(poles.map(({ re }) => re)).toAgreeWith([-Math.PI, -Math.PI], { relative: 1e-9 })
    expect(Math.hypot(poles[0]!.re, poles[0]!.im)).toAgreeWith(2 * Math.PI * Math.sqrt(1e12 - 0.25), {
      relative: 1e-14,
    })
  })

  it.each<[string, () => unknown, string]>([
    ['a cut-off at 0 Hz', () => toLowPass(prototype, 0), 'value-not-positive'],
    ['a negative cut-off', () => toHighPass(prototype, -1), 'value-not-positive'],
    ['a cut-off that is no number', () => toHighPass(prototype, NaN), 'value-not-positive'],
    ['a band upside down', () => toBandPass(prototype, { lowerHz: 2, upperHz: 1 }), 'value-out-of-range'],
    ['a band of no width', () => toBandStop(prototype, { lowerHz: 2, upperHz: 2 }), 'value-out-of-range'],
    ['an endless band', () => toBandStop(prototype, { lowerHz: 2, upperHz: Infinity }), 'value-not-positive'],
  ])('refuse %s', (_, run, code) => {
    expect(run).toThrow(ProblemError)
    expect(run).toThrow(expect.objectContaining({ code }))
  })
})
