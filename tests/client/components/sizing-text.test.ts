import { describe, expect, it } from 'vitest'
import {
  bestSentence,
  conditionWords,
  localTime,
  markdownLink,
  selfCheckSentence,
} from '../../../src/components/sizing/sizing-text'
import { formatPercent, formatQuantity } from '#shared/quantities/format'
import type { Unit } from '#shared/quantities/unit'
import { lowPassSizing } from '../support/low-pass-sizing'

const figure = (value: number, unit: string) => formatQuantity(value, unit as Unit)
const trimmed = (value: number, unit: string) => formatQuantity(value, unit as Unit, { trim: true })
const percent = (fraction: number) => formatPercent(fraction, { trim: true })

describe('the Markdown of a sizing', () => {
  it('names number, title and the first figure that was asked, as fitted', () =>
    expect(markdownLink(lowPassSizing(), figure)).toBe(
      '[S-12: Inverting low-pass, first order, f_c 2.401\u2009kHz](https://shelf.example/sizings/S-12)',
    ))

  it('gives the figure under the conditions where that stands beside the unloaded one', () => {
    const sizing = lowPassSizing()
    sizing.outcome.results.f_c!.underConditions = 2390
    expect(markdownLink(sizing, figure)).toContain('f_c 2.390\u2009kHz]')
  })

  it('lets a title neither end the link nor format it', () => {
    const sizing = lowPassSizing()
    sizing.titleBlock.title = 'a](https://evil.example) *b* <c> _d_ `e`'
    expect(markdownLink(sizing, figure)).toMatch(
      /^\[S-12: a\\\]\(https:\/\/evil\.example\) \\\*b\\\* \\<c> \\_d\\_ \\`e\\`,/,
    )
  })

  it('takes the first result where nothing was asked, and none where there is none', () => {
    const sizing = lowPassSizing()
    delete sizing.outcome.results.f_c!.target
    delete sizing.outcome.results.K!.target
    expect(markdownLink(sizing, figure)).toContain('f_c 2.401')
    sizing.outcome.results = {}
    expect(markdownLink(sizing, figure)).toBe(
      '[S-12: Inverting low-pass, first order](https://shelf.example/sizings/S-12)',
    )
  })
})

describe('the conditions of a sizing in words', () => {
  it('names source and load also when they are ideal', () =>
    expect(conditionWords({}, trimmed)).toEqual([
      { label: 'source', value: '0\u2009Ω' },
      { label: 'load', value: 'none' },
    ]))

  it('joins both parts of the load and both rails, and gives the temperature in °C', () =>
    expect(
      conditionWords(
        {
          sourceOhm: 50,
          loadOhm: 10e3,
          loadFarad: 1e-10,
          supplyPlusVolt: 5,
          supplyMinusVolt: -5,
          temperatureKelvin: 233.15,
          levelVoltPeak: 1,
        },
        trimmed,
      ).map((one) => `${one.label} ${one.value}`),
    ).toEqual([
      'source 50\u2009Ω',
      'load 10\u2009kΩ ∥ 100\u2009pF',
      'supply ±5\u2009V',
      'largest signal, peak 1\u2009V',
      'temperature −40\u2009°C',
    ]))
})

describe('the stored self-check in a sentence', () => {
  const line = (subject: string, outcome: 'agrees' | 'differs' | 'not checked') => ({
    subject,
    outcome,
    worstRelativeDifference: null,
    detail: '',
  })

  it('says how well formula and circuit agree, and over how many sets', () =>
    expect(selfCheckSentence(lowPassSizing().selfCheck)).toBe(
      '✓ Formulas and circuit agree to 1\u2009×\u200910⁻¹⁵, at these values and at 50 other sets.',
    ))

  it('names what was not checked beside what agrees', () =>
    expect(
      selfCheckSentence({ ...lowPassSizing().selfCheck, lines: [line('f_c', 'agrees'), line('Z_in', 'not checked')] }),
    ).toContain('; not checked: Z_in.'))

  it('never calls an unchecked or a differing block agreeing', () => {
    const differs = selfCheckSentence({
      outcome: 'differs',
      worstRelativeDifference: 0.3,
      sets: 50,
      lines: [line('response', 'agrees'), line('f_c', 'differs')],
    })
    expect(differs).toBe('△ Formula and circuit differ by 30\u2009%: f_c. Do not use these figures.')
    expect(selfCheckSentence({ outcome: 'not checked', worstRelativeDifference: null, sets: 0, lines: [] })).toBe(
      '△ Formulas are not checked against the circuit.',
    )
  })
})

describe('how good a set is', () => {
  it('counts the sets and gives the worst error', () => {
    const sizing = lowPassSizing()
    sizing.outcome.setsTried = 12786
    expect(bestSentence(sizing, percent)).toBe('Best of 12\u2009786 sets from stock, worst error 0.02\u2009%.')
  })

  it('is not said where every value was given', () => {
    const sizing = lowPassSizing()
    sizing.outcome.setsTried = 0
    expect(bestSentence(sizing, percent)).toBeNull()
  })
})

describe('the time of saving', () => {
  it('is that of the person’s zone, to the minute, with the zone', () =>
    expect(localTime('2026-12-01T23:26:28.857Z', 'Asia/Tokyo')).toMatch(/^2026-12-02 08:26 (GMT\+9|JST)$/))
})
