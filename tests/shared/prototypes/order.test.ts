import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { ProblemError } from '#shared/problems'
import type { AttenuationSpec, BandStopSpec, OrderFamily } from '#shared/prototypes/order'
import { evenPassEdges, minimumOrder, ORDER_FAMILIES, selectivity } from '#shared/prototypes/order'
import { lowPassPrototype } from '#shared/prototypes/prototype'
import type { Band } from '#shared/prototypes/transformation'
import { toBandPass, toBandStop, toHighPass, toLowPass } from '#shared/prototypes/transformation'
import { magnitudeAt } from '#shared/prototypes/zero-pole-gain'

interface SpecCheck {
  type: AttenuationSpec['type']
  pass_Hz: number | [number, number]
  stop_Hz: number | [number, number]
  pass_dB: number
  stop_dB: number
  selectivity: number
  order: Record<OrderFamily, number>
  real_order: Record<OrderFamily, number>
  also_acceptable?: Partial<Record<OrderFamily, number>>
}
const { specs } = JSON.parse(readFileSync(new URL('../../checks/order-estimates.json', import.meta.url), 'utf8')) as {
  specs: SpecCheck[]
}
const specOf = ({ type, pass_Hz, stop_Hz, pass_dB, stop_dB }: SpecCheck) =>
  ({ type, passHz: pass_Hz, stopHz: stop_Hz, passDb: pass_dB, stopDb: stop_dB }) as AttenuationSpec

// Source: scipy.signal buttord, cheb1ord, cheb2ord, ellipord, held against the classical formulas, as the header says;
// its tolerance: order exact, real order 1e-6 relative.
describe.each(specs.map((check) => [`${check.type} ${check.pass_Hz}, ${check.stop_Hz} Hz`, check] as const))(
  '%s',
  (_, check) => {
    const found = minimumOrder(specOf(check))

    it('has the selectivity and the real orders of the outside figures', () => {
      expect(selectivity(specOf(check))).toAgreeWith(check.selectivity, { relative: 1e-9 })
      for (const family of ORDER_FAMILIES)
        expect(found[family].realOrder).toAgreeWith(check.real_order[family], { relative: 1e-6 })
    })

    it('has the orders of the outside figures, those with the pass edges kept where a band-stop has two', () => {
      for (const family of ORDER_FAMILIES)
        expect(found[family].order).toBe(check.also_acceptable?.[family] ?? check.order[family])
    })

    it('is kept by the filter of that order, and by none of the order below', () => {
      const spec = specOf(check)
      for (const family of ['chebyshev1', 'elliptic'] as const) {
        const { order } = found[family]
        if (order > 20) continue
        const lossDb = (n: number, hz: number) =>
          -20 * Math.log10(magnitudeAt(designed(spec, family, n), 2 * Math.PI * hz))
        const stops = [spec.stopHz].flat()
        for (const hz of [spec.passHz].flat()) expect(lossDb(order, hz)).toAgreeWith(spec.passDb, { absolute: 1e-8 })
        for (const hz of stops) expect(lossDb(order, hz)).toBeGreaterThan(spec.stopDb - 1e-8)
        if (order > 1 && family === 'chebyshev1')
          expect(Math.min(...stops.map((hz) => lossDb(order - 1, hz)))).toBeLessThan(spec.stopDb)
      }
    })
  },
)

it.each(specs.filter(({ type }) => type === 'band-stop'))(
  'band-stop $pass_Hz, $stop_Hz Hz has the lower orders with the pass edges moved evenly',
  (check) => {
    const spec = specOf(check) as BandStopSpec
    const passHz = evenPassEdges(spec)
    expect(passHz[0]).toBeGreaterThanOrEqual(spec.passHz[0])
    expect(passHz[1]).toBeLessThanOrEqual(spec.passHz[1])
    const even = minimumOrder({ ...spec, passHz })
    for (const family of ORDER_FAMILIES) expect(even[family].order).toBe(check.order[family])
  },
)

function designed(spec: AttenuationSpec, family: OrderFamily, order: number) {
  const prototype = lowPassPrototype({ family, order, rippleDb: spec.passDb, stopDb: spec.stopDb })
  if (spec.type === 'low-pass') return toLowPass(prototype, spec.passHz)
  if (spec.type === 'high-pass') return toHighPass(prototype, spec.passHz)
  const band: Band = { lowerHz: spec.passHz[0], upperHz: spec.passHz[1] }
  return spec.type === 'band-pass' ? toBandPass(prototype, band) : toBandStop(prototype, band)
}

describe('minimum order', () => {
  it('keeps the order when the stop-band edge is met exactly', () => {
    for (let n = 1; n <= 30; n++) {
      const passDb = 10 * Math.log10(2)
      const stopDb = 10 * Math.log10(1 + 2 ** (2 * n))
      if (n > 0)
        expect(minimumOrder({ type: 'low-pass', passHz: 1, stopHz: 2, passDb, stopDb }).butterworth.order).toBe(n)
    }
  })

  it('is at least one', () => {
    const easy = minimumOrder({ type: 'low-pass', passHz: 1, stopHz: 1e6, passDb: 3, stopDb: 10 })
    for (const family of ORDER_FAMILIES) expect(easy[family].order).toBe(1)
  })

  it('stays finite with edges a millionth apart and 300 dB', () => {
    const hard = minimumOrder({ type: 'high-pass', passHz: 1.000001, stopHz: 1, passDb: 0.01, stopDb: 300 })
    for (const family of ORDER_FAMILIES) expect(Number.isFinite(hard[family].realOrder)).toBe(true)
    expect(hard.elliptic.order).toBeLessThan(hard.chebyshev1.order)
    expect(hard.chebyshev1.order).toBeLessThan(hard.butterworth.order)
  })

  it.each<[string, AttenuationSpec, string, string]>([
    [
      'a low-pass upside down',
      { type: 'low-pass', passHz: 2, stopHz: 1, passDb: 1, stopDb: 9 },
      'value-out-of-range',
      '#/stopHz',
    ],
    [
      'a high-pass upside down',
      { type: 'high-pass', passHz: 1, stopHz: 2, passDb: 1, stopDb: 9 },
      'value-out-of-range',
      '#/stopHz',
    ],
    [
      'a band-pass inside out',
      { type: 'band-pass', passHz: [1, 4], stopHz: [2, 3], passDb: 1, stopDb: 9 },
      'value-out-of-range',
      '#/stopHz',
    ],
    [
      'a band-stop inside out',
      { type: 'band-stop', passHz: [2, 3], stopHz: [1, 4], passDb: 1, stopDb: 9 },
      'value-out-of-range',
      '#/stopHz',
    ],
    [
      'edges that are equal',
      { type: 'low-pass', passHz: 1, stopHz: 1, passDb: 1, stopDb: 9 },
      'value-out-of-range',
      '#/stopHz',
    ],
    [
      'a stop band that loses less',
      { type: 'low-pass', passHz: 1, stopHz: 2, passDb: 3, stopDb: 3 },
      'value-out-of-range',
      '#/stopDb',
    ],
    ['4000 dB', { type: 'low-pass', passHz: 1, stopHz: 2, passDb: 3, stopDb: 4000 }, 'value-out-of-range', '#/stopDb'],
    [
      'an edge at 0 Hz',
      { type: 'low-pass', passHz: 0, stopHz: 2, passDb: 3, stopDb: 30 },
      'value-not-positive',
      '#/passHz',
    ],
    [
      'an edge that is no number',
      { type: 'band-pass', passHz: [1, 2], stopHz: [NaN, 3], passDb: 3, stopDb: 30 },
      'value-not-positive',
      '#/stopHz',
    ],
    [
      'no loss in the pass band',
      { type: 'low-pass', passHz: 1, stopHz: 2, passDb: 0, stopDb: 30 },
      'value-not-positive',
      '#/passDb',
    ],
  ])('refuses %s', (_, spec, code, pointer) => {
    const run = () => minimumOrder(spec)
    expect(run).toThrow(ProblemError)
    expect(run).toThrow(expect.objectContaining({ code, problems: [expect.objectContaining({ pointer })] }))
  })
})
