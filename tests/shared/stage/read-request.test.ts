import { describe, expect, it } from 'vitest'
import type { ComputeRequest } from '#shared/contracts/compute'
import type { Problem } from '#shared/problems'
import { valueOf } from '#shared/problems'
import { readCondition, readPartValue, readSeries, readStageRequest, readTarget } from '#shared/stage/index'
import { stageOf } from '../../support/stages'

const inverting = stageOf('lp1-inv')
const nonInverting = stageOf('lp1-ni')

const problemsOf = (request: ComputeRequest, stage = inverting): Problem[] => {
  const reading = readStageRequest(stage, request)
  return reading.ok ? [] : reading.problems
}
const only = (request: ComputeRequest, stage = inverting): Problem => {
  const problems = problemsOf(request, stage)
  expect(problems).toHaveLength(1)
  return problems[0]!
}

describe('values', () => {
  it.each<[string | number, number]>([
    [22100, 22100],
    ['22.1k', 22100],
    ['22k1', 22100],
    ['22.1 kΩ', 22100],
    ['22.1 kΩ', 22100],
    ['22100', 22100],
    [' 22.1 kohm ', 22100],
    ['0.0221M', 22100],
  ])('are read as typed or in SI: %s', (typed, ohm) => {
    expect(valueOf(readPartValue(inverting, 'Ri', typed))).toAgreeWith(ohm, { relative: 1e-15 })
  })

  it.each<[string, string | number, string]>([
    ['Ri', '10 nF', 'unit'],
    ['Cf', '10 kΩ', 'unit'],
    ['Ri', '2.4 kHz', 'unit'],
    ['Ri', '', ''],
    ['Ri', 'about 10k', ''],
    ['Ri', '10k 10k', ''],
    ['Ri', '1,000', ''],
    ['Ri', '∞', ''],
    ['Ri', 'NaN', ''],
    ['Ri', 'Infinity', ''],
    ['Ri', '1e999', ''],
    ['Ri', '0x10', ''],
    ['Ri', NaN, ''],
    ['Ri', Infinity, ''],
    ['Ri', -Infinity, ''],
  ])('are refused in a sentence: %s %s', (name, typed) => {
    const problem = only({ values: { [name]: typed } })
    expect(problem.pointer).toBe(`#/values/${name}`)
    expect(problem.detail).toMatch(/[.?]$/)
    expect(problem.detail.length).toBeGreaterThan(15)
  })

  it('say what was understood of a negative or absurd one', () => {
    expect(only({ values: { Ri: -10e3 } })).toMatchObject({ code: 'value-not-positive' })
    expect(only({ values: { Ri: '-10k' } }).detail).toMatch(/10/)
    expect(only({ values: { Ri: 0 } })).toMatchObject({ code: 'value-not-positive' })
    expect(only({ values: { Ri: '0' } })).toMatchObject({ code: 'value-not-positive' })
    expect(only({ values: { Cf: 1 / 0.05 } })).toMatchObject({ code: 'value-out-of-range' })
    expect(only({ values: { Cf: '22' } }).detail).toMatch(/^22\.00\sF cannot be built; Cf takes/)
    expect(only({ values: { Ri: 1e-9 } })).toMatchObject({ code: 'value-out-of-range' })
    expect(only({ values: { Ri: Number.MAX_VALUE } })).toMatchObject({ code: 'value-out-of-range' })
    expect(only({ values: { Ri: Number.MIN_VALUE } })).toMatchObject({ code: 'value-out-of-range' })
  })

  it('of an unknown part name the near one, else all', () => {
    expect(only({ values: { ri: '10k' } })).toMatchObject({ code: 'part-unknown', pointer: '#/values/ri' })
    expect(only({ values: { ri: '10k' } }).detail).toContain('Did you mean Ri?')
    expect(only({ values: { Rff: '10k' } }).detail).toContain('Did you mean Rf?')
    expect(only({ values: { Zebra: '10k' } }).detail).toContain('It has Ri, Rf, Cf.')
    expect(only({ values: { f_c: '10k' } })).toMatchObject({ code: 'part-unknown' })
  })

  it('of several wrong entries are all told', () => {
    const problems = problemsOf({
      values: { Ri: '-1', Rx: 1 },
      targets: { f_c: '0', Z: 1 },
      conditions: { sourceOhm: -1 },
      series: { Rf: 'E7' },
      output: 'lp',
    })
    expect(problems.map((one) => one.pointer)).toEqual([
      '#/values/Ri',
      '#/values/Rx',
      '#/targets/f_c',
      '#/targets/Z',
      '#/conditions/sourceOhm',
      '#/series/Rf',
      '#/output',
    ])
  })
})

describe('names that mean something to the language', () => {
  it.each(['__proto__', 'constructor', 'toString', 'hasOwnProperty', 'prototype', 'valueOf'])(
    '%s are no parts',
    (name) => {
      // As a body arrives: JSON makes __proto__ an own key.
      const entries = JSON.parse(`{ ${JSON.stringify(name)}: 1 }`) as Record<string, number>
      for (const group of ['values', 'targets', 'conditions'] as const) {
        const problem = only({ [group]: entries })
        expect(problem.pointer).toBe(`#/${group}/${name}`)
        expect(problem.detail).toContain(name)
      }
      expect(
        only({ series: { ...{}, ...JSON.parse(`{ ${JSON.stringify(name)}: "E12" }`) } as never }).detail,
      ).toContain(name)
      expect(only({ output: name }).detail).toContain(name)
      expect(({} as Record<string, unknown>)['polluted']).toBeUndefined()
    },
  )

  it('are escaped in the pointer as JSON pointers are', () => {
    // RFC 6901: ~ is ~0 and / is ~1.
    expect(only({ values: { 'R~/1': 1 } }).pointer).toBe('#/values/R~0~11')
  })
})

describe('targets', () => {
  it.each<[string | number, number]>([
    [2400, 2400],
    ['2.4 kHz', 2400],
    ['2k4', 2400],
    ['2.4', 2.4],
  ])('of a frequency are read in hertz when bare: %s', (typed, hertz) => {
    expect(valueOf(readTarget(inverting, 'f_c', typed))).toAgreeWith(hertz, { relative: 1e-15 })
  })

  it('of a gain are a ratio or dB, the sign of dB being that of the block', () => {
    expect(valueOf(readTarget(inverting, 'K', '-2'))).toBe(-2)
    expect(valueOf(readTarget(inverting, 'K', '−2'))).toBe(-2)
    expect(valueOf(readTarget(inverting, 'K', -2))).toBe(-2)
    // 20 dB is a ratio of 10, 6 dB one of 1.9953: ISO 80000-1, level of a field quantity.
    expect(valueOf(readTarget(inverting, 'K', '20 dB'))).toAgreeWith(-10, { relative: 1e-12 })
    expect(valueOf(readTarget(inverting, 'K', '-20 dB'))).toAgreeWith(-0.1, { relative: 1e-12 })
    expect(valueOf(readTarget(nonInverting, 'K', '6 dB'))).toAgreeWith(10 ** 0.3, { relative: 1e-12 })
  })

  it('of the wrong sign are asked back', () => {
    expect(only({ targets: { K: 2 } })).toMatchObject({
      code: 'target-wrong-sign',
      detail: 'This stage inverts: −2?',
      pointer: '#/targets/K',
    })
    expect(only({ targets: { K: '3.3' } }).detail).toBe('This stage inverts: −3.3?')
    expect(only({ targets: { K: -4 } }, nonInverting).detail).toBe('K is positive in this block: 4?')
  })

  it.each<[string, string | number, string]>([
    ['f_c', -1, 'value-not-positive'],
    ['f_c', 0, 'value-not-positive'],
    ['f_c', 1e300, 'value-out-of-range'],
    ['f_c', 1e-300, 'value-out-of-range'],
    ['K', 0, 'value-not-positive'],
    ['K', -1e30, 'value-out-of-range'],
    ['K', -1e-30, 'value-out-of-range'],
    ['f_d', 1, 'result-unknown'],
    ['Z_in', 1e4, 'target-not-settable'],
    ['Ri', 1e4, 'result-unknown'],
  ])('are refused: %s %s (%s)', (name, typed, code) => {
    expect(only({ targets: { [name]: typed } })).toMatchObject({ code, pointer: `#/targets/${name}` })
  })

  it.each<[string, string | number]>([
    ['f_c', '2.4 kΩ'],
    ['f_c', NaN],
    ['f_c', 'inf'],
    ['K', '2 kHz'],
    ['K', NaN],
    ['K', -Infinity],
    ['K', 'minus two'],
    ['K', '400 dB dB'],
    ['K', '1e6 dB'],
  ])('that are no quantity of theirs are refused: %s %s', (name, typed) => {
    expect(only({ targets: { [name]: typed } }).detail).toMatch(/[.?]$/)
  })

  it('name those that can be asked for', () => {
    expect(only({ targets: { Z_in: 1e4 } }).detail).toContain('f_c, K can.')
    expect(only({ targets: { fc: 1e4 } }).detail).toContain('Did you mean f_c?')
  })
})

describe('conditions', () => {
  it.each<[string, string | number, number]>([
    ['sourceOhm', '50', 50],
    ['sourceOhm', 0, 0],
    ['loadOhm', '10k', 1e4],
    ['loadFarad', '100p', 1e-10],
    ['supplyMinusVolt', '-12 V', -12],
    ['supplyPlusVolt', 5, 5],
    ['temperatureKelvin', '25 °C', 298.15],
    ['levelVoltPeak', '2.5', 2.5],
  ])('%s %s', (name, typed, si) => {
    expect(valueOf(readCondition(name, typed))).toAgreeWith(si, { relative: 1e-12 })
  })

  it.each<[string, string | number]>([
    ['sourceOhm', -1],
    ['sourceOhm', '1e15'],
    ['sourceOhm', NaN],
    ['loadOhm', 0],
    ['loadFarad', '3 ohm'],
    ['temperatureKelvin', '-300 °C'],
    ['supplyPlusVolt', 1e6],
    ['source', 1],
  ])('are refused: %s %s', (name, typed) => {
    const problem = only({ conditions: { [name]: typed } })
    expect(problem.pointer).toBe(`#/conditions/${name}`)
    expect(problem.detail).toMatch(/[.?]$/)
  })
})

describe('series', () => {
  it('are read in either case, others and unknown parts refused', () => {
    expect(valueOf(readSeries(inverting, 'Ri', 'e24'))).toBe('E24')
    expect(only({ series: { Ri: 'E7' } })).toMatchObject({ code: 'series-unknown', pointer: '#/series/Ri' })
    expect(only({ series: { R9: 'E24' } })).toMatchObject({ code: 'part-unknown' })
  })
})
