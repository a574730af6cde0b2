import { describe, expect, it } from 'vitest'
import { benchAddress, benchStateOf } from '../../../src/components/sizing/bench-address'
import { qrPath } from '../../../src/components/sizing/qr-path'
import { sizingChoicesOf, sizingListAddress } from '../../../src/components/sizing/sizing-choices'
import { drawingTexts, fittedParts, storedResults } from '../../../src/components/sizing/sizing-rows'
import { curvePath, decadeTicks, decadeWords, minorTicks } from '../../../src/components/sizing/still-plot'
import { storedCurve, storedReading } from '../../../src/components/sizing/stored-curve'
import { plotScale } from '../../../src/components/plot/plot-scale'
import { ENGINE_VERSION, readStage } from '#shared/stage/index'
import { valueOf } from '#shared/problems'
import { lowPassSizing } from '../support/low-pass-sizing'

const stageOf = (sizing = lowPassSizing()) =>
  valueOf(readStage({ circuit: sizing.circuit, calculator: sizing.calculator }))

describe('the parts of a sizing', () => {
  it('are listed designator by designator, with how each was set', () => {
    const rows = fittedParts(lowPassSizing(), stageOf())
    expect(rows.map((row) => [row.ref, row.value, row.state])).toEqual([
      ['Ri', 22100, 'held'],
      ['Rf', 44200, 'solved'],
      ['Cf', 1.5e-9, 'free'],
    ])
  })

  it('have a row for each of the matched ones', () => {
    const stage = stageOf()
    stage.parts[0]!.refs = ['Ria', 'Rib']
    const rows = fittedParts(lowPassSizing(), stage)
    expect(rows.map((row) => row.ref)).toEqual(['Ria', 'Rib', 'Rf', 'Cf'])
    expect(drawingTexts(lowPassSizing(), stage, (value, unit) => `${value} ${unit}`)).toEqual({
      Ria: '22100 Ω',
      Rib: '22100 Ω',
      Rf: '44200 Ω',
      Cf: '1.5e-9 F',
    })
  })

  it('are still listed when the revision cannot be read', () =>
    expect(fittedParts(lowPassSizing(), null).map((row) => row.ref)).toEqual(['Ri', 'Rf', 'Cf']))
})

describe('the results of a sizing', () => {
  it('are the stored ones, whatever the circuit would give now', () => {
    const sizing = lowPassSizing()
    sizing.outcome.results.f_c!.value = 9999
    const [corner, gain] = storedResults(sizing, stageOf(sizing))
    expect(corner).toMatchObject({ value: 9999, target: 2400, isGain: false, meaning: 'cut-off frequency' })
    expect(gain).toMatchObject({ value: -2, isGain: true, error: 0, underConditions: null })
  })
})

describe('the stored response', () => {
  it('is shown as it is stored', () => {
    const sizing = lowPassSizing()
    const curve = storedCurve(sizing)
    expect(curve.frequenciesHz).toBe(sizing.response.frequenciesHz)
    expect(curve.magnitudeDb[0]).toBeCloseTo(
      20 * Math.log10(Math.hypot(sizing.response.re[0]!, sizing.response.im[0]!)),
      12,
    )
    expect(curve.phaseDegrees[0]).toBeCloseTo((180 * sizing.phaseRad[0]!) / Math.PI, 12)
  })

  it('reads exactly at the points of the test table', () => {
    const sizing = lowPassSizing()
    const { frequencyHz, gainDb, phaseRad } = sizing.testTable[1]!
    expect(storedReading(sizing)(frequencyHz)).toMatchObject({ levelDb: gainDb, phaseRad })
  })

  // Outside figure: |H| of a first-order low-pass a decade above its corner is K/√(1 + 10²), 20.04 dB below K.
  it('reads between its points within 0.01 dB of the first-order law', () => {
    const sizing = lowPassSizing()
    const corner = sizing.testTable[1]!.frequencyHz
    for (const ratio of [0.08, 0.37, 1.9, 9.7])
      expect(storedReading(sizing)(ratio * corner).levelDb).toBeCloseTo(20 * Math.log10(2 / Math.hypot(1, ratio)), 2)
  })

  it('stays at its ends beyond them', () => {
    const sizing = lowPassSizing()
    expect(storedReading(sizing)(1e-9).levelDb).toBeCloseTo(storedCurve(sizing).magnitudeDb[0]!, 12)
    expect(storedReading(sizing)(1e15).levelDb).toBeCloseTo(storedCurve(sizing).magnitudeDb.at(-1)!, 12)
  })
})

describe('opening the values of a sizing on the bench', () => {
  it('carries what was held, asked and around it, on the sizing’s own revision', () => {
    const sizing = lowPassSizing({ engineVersion: ENGINE_VERSION })
    expect(benchAddress(sizing, stageOf(sizing))).toBe(
      '/blocks/lp1-inv/revisions/3?Ri=22.1k&f_c=2.4k&K=-2&sourceOhm=50',
    )
    expect(benchAddress(sizing, stageOf(sizing), 4)).toContain('/revisions/4?')
  })

  it('holds every value where the bench would solve otherwise', () => {
    const held = { Ri: 22100, Rf: 44200, Cf: 1.5e-9 }
    expect(benchStateOf(lowPassSizing({ engineVersion: '0.0.1' })).held).toEqual(held)
    const exact = lowPassSizing({ engineVersion: ENGINE_VERSION })
    exact.asked.goodEnough = 0
    expect(benchStateOf(exact).held).toEqual(held)
  })

  it('still leads to the revision when it cannot be read here', () =>
    expect(benchAddress(lowPassSizing(), null)).toBe('/blocks/lp1-inv/revisions/3'))
})

describe('the choices of the list', () => {
  it('are read from the address and written back', () => {
    expect(sizingChoicesOf({ mine: 'true', block: 'LP1-INV' })).toEqual({ isMine: true, block: 'lp1-inv' })
    expect(sizingListAddress({ isMine: true, block: 'lp1-inv' })).toBe('/sizings?mine=true&block=lp1-inv')
    expect(sizingListAddress({ isMine: false })).toBe('/sizings')
  })

  it.each([[{ block: 'no code!' }], [{ mine: 'perhaps' }], [{ block: ['a', 'b'] }], [{ block: null }], [{}]])(
    'pass over %j',
    (query) => expect(sizingChoicesOf(query)).toEqual({}),
  )
})

describe('the still plot', () => {
  const scale = plotScale([10, 1e6], [6, -60], [180, 90])

  it('labels whole decades by prefix and rules between them', () => {
    expect(decadeTicks(scale).map((tick) => tick.label)).toEqual([
      '10',
      '100',
      '1\u2009k',
      '10\u2009k',
      '100\u2009k',
      '1\u2009M',
    ])
    expect(minorTicks(scale)).toHaveLength(5 * 8)
    expect([decadeWords(-4), decadeWords(-1), decadeWords(9)]).toEqual(['100\u2009µ', '100\u2009m', '1\u2009G'])
  })

  it('breaks the curve where there is no figure', () =>
    expect(
      curvePath(
        [1, 2, 3, 4],
        [0, NaN, 5, 6],
        (hertz) => hertz,
        (figure) => figure,
      ),
    ).toBe('M1.0 0.0M3.0 5.0L4.0 6.0'))
})

describe('the path of a QR code', () => {
  it('draws each run of dark modules once', () => {
    const dark = ['##.', '..#', '###']
    expect(qrPath({ size: 3, get: (row, column) => dark[row]![column] === '#' })).toBe(
      'M0 0h2v1H0zM2 1h1v1H2zM0 2h3v1H0z',
    )
  })
})
