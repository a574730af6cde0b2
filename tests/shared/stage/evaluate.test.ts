import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { ComputeRequest, StageOutcome } from '#shared/contracts/compute'
import { readBlock } from '#shared/page-source/read-block'
import { valueOf } from '#shared/problems'
import {
  evaluateStage,
  readStage,
  readStageRequest,
  selfCheck,
  stageResponse,
  testTable,
  defaultValues,
} from '#shared/stage/index'
import type { Stage } from '#shared/stage/index'

const stageOf = (code: string): Stage => valueOf(readBlock(readFileSync(`content-seed/${code}.md`, 'utf8'))).stage
const evaluated = (stage: Stage, request: ComputeRequest): StageOutcome =>
  evaluateStage(stage, valueOf(readStageRequest(stage, request)))

describe('a stage', () => {
  const inverting = stageOf('lp1-inv')

  it('keeps its defaults when nothing is asked', () => {
    const outcome = evaluated(inverting, {})
    expect(outcome.values).toEqual({ Ri: 22100, Rf: 44200, Cf: 1.5e-9 })
    expect(new Set(Object.values(outcome.parts).map((part) => part.state))).toEqual(new Set(['default']))
    expect(outcome.setsTried).toBe(0)
  })

  it('sized for 2.4 kHz and −2 takes values of E96 and E12 that meet both best', () => {
    const { values, results, parts, runnersUp } = evaluated(inverting, { targets: { f_c: '2.4 kHz', K: -2 } })
    // By hand: 44.2 kΩ and 1.5 nF give 2400.53 Hz, 0.022 % high; 22.1 kΩ is exactly half. Series: IEC 60063.
    expect(values).toEqual({ Ri: 22100, Rf: 44200, Cf: 1.5e-9 })
    expect(results['f_c']!.relativeError).toBeCloseTo(2400.527 / 2400 - 1, 6)
    expect(results['K']!.relativeError).toBeCloseTo(0, 12)
    expect(parts['Rf']!.ideal! / (1 / (2 * Math.PI * 2400 * 1.5e-9))).toBeCloseTo(1, 9)
    for (const one of runnersUp) expect(one.worstRelativeError).toBeGreaterThanOrEqual(0)
  })

  it('does not move a held part, and shows the error of a target that nothing can meet', () => {
    const { values, parts, results } = evaluated(inverting, {
      values: { Ri: '10k', Rf: '10k' },
      targets: { K: -2, f_c: 1000 },
    })
    expect([values['Ri'], values['Rf']]).toEqual([10e3, 10e3])
    expect([parts['Ri']!.state, parts['Rf']!.state, parts['Cf']!.state]).toEqual(['held', 'held', 'free'])
    expect(results['K']!.relativeError).toBeCloseTo(0.5, 12)
  })

  it('accepts a value outside the series and marks it', () => {
    const { parts } = evaluated(inverting, { values: { Ri: '22.3k', Rf: '44.2k' } })
    expect([parts['Ri']!.inStock, parts['Rf']!.inStock]).toEqual([false, true])
  })

  it('takes another series for a part when asked', () => {
    const { values, parts } = evaluated(inverting, { targets: { f_c: 2400, K: -2 }, series: { Rf: 'e12', Ri: 'E12' } })
    expect(parts['Rf']!.series).toBe('E12')
    const twelve = [1, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2] // IEC 60063
    for (const name of ['Rf', 'Ri']) {
      const digits = Number((values[name]! / 10 ** Math.floor(Math.log10(values[name]!))).toFixed(3))
      expect(twelve).toContain(digits)
    }
  })

  it('shows a limit with its figures', () => {
    const { limits } = evaluated(inverting, { values: { Ri: 500, Rf: 500e3, Cf: '10p' } })
    expect(limits.map((limit) => limit.level)).toEqual(['warning', 'warning', 'warning', 'note'])
    expect(limits.map((limit) => limit.say).join(' ')).not.toContain('{')
    expect(limits[2]!.say).toMatch(/^Ri is 500\.0\sΩ, and/)
  })

  it('gives the figure under a source only where it differs by more than 0.1 %', () => {
    const under = (sourceOhm: number) =>
      evaluated(inverting, { conditions: { sourceOhm } }).results['K']!.underConditions
    expect(under(20)).toBeUndefined() // 20 Ω of 22.1 kΩ are 0.09 %
    expect(under(25)! / (-44200 / 22125)).toBeCloseTo(1, 9)
  })

  it('has a test table of gains and phases that the trade knows', () => {
    const table = testTable(inverting, defaultValues(inverting), {})
    // First order: 0.0432 dB, 3.0103 dB and 20.0432 dB below K of 6.0206 dB; 180° less atan(f/f_c). Textbook.
    expect(table.map((point) => 6.0206 - point.gainDb)).toEqual([
      expect.closeTo(0.0432, 3),
      expect.closeTo(3.0103, 3),
      expect.closeTo(20.0432, 3),
    ])
    expect(table.map((point) => (point.phaseRad * 180) / Math.PI)).toEqual([
      expect.closeTo(174.289, 2),
      expect.closeTo(135, 6),
      expect.closeTo(95.711, 2),
    ])
  })
})

describe('a target out of reach', () => {
  it('is told with the nearest one', () => {
    const { infeasible } = evaluated(stageOf('lp2-sku'), { targets: { f_0: 1000, Q: 7 } })
    expect(infeasible).toMatchObject([{ part: 'R1', target: 'Q', nearest: 5 }])
    expect(infeasible[0]!.say).toContain('nearest Q is 5')
  })

  it('is not told for a part that is held', () => {
    const { infeasible } = evaluated(stageOf('lp1-ni'), { targets: { K: 0.5 }, values: { Rf: '10k' } })
    expect(infeasible).toEqual([])
  })
})

describe('a circuit with a pair, matched parts, two outputs and a reference', () => {
  const circuit = [
    'input in 1,3',
    'wire 1,3 2,3',
    'R R1a 2,3 5,3',
    'wire 5,3 7,3',
    'C C1 7,3 7,6',
    'reference Vref 7,6',
    'R R1b 7,3 10,3',
    'C C2 10,3 10,6',
    'wire 7,6 10,6',
    'output mid 7,3',
    'output out + 7,3 - 10,3',
  ].join('\n')
  const calculator = [
    'parts:',
    '  R1: { of: [R1a, R1b], default: 10k, from: 1k, to: 100k }',
    '  C1: { default: 10n }',
    '  C2: { default: 10n }',
    'results:',
    '  K: { formula: 1, meaning: gain at rest, is: gain at 0 Hz }',
    '  peak: { meaning: largest difference, is: peak gain, output: out }',
    'response:',
    '  mid: (1 + s*R1*C2)/(1 + s*(R1*C1 + 2*R1*C2) + s^2*R1^2*C1*C2)',
    '  out: s*R1*C2/(1 + s*(R1*C1 + 2*R1*C2) + s^2*R1^2*C1*C2)',
  ].join('\n')
  const stage = valueOf(readStage({ circuit, calculator }))

  it('shares one value between the matched parts', () => {
    expect(stage.parts.map((part) => [part.name, part.refs])).toEqual([
      ['R1', ['R1a', 'R1b']],
      ['C1', ['C1']],
      ['C2', ['C2']],
    ])
    expect(Object.keys(evaluated(stage, {}).values)).toEqual(['R1', 'C1', 'C2'])
  })

  it('checks the response of each output by itself', () => {
    const check = selfCheck(stage, defaultValues(stage))
    expect(check.lines.map((line) => [line.subject, line.outcome])).toEqual([
      ['response mid', 'agrees'],
      ['response out', 'agrees'],
      ['K', 'agrees'],
      ['peak', 'not checked'],
    ])
  })

  it('gives a figure without a formula as it is found on the circuit', () => {
    // Band-pass R·C·s/(1 + 3·R·C·s + (R·C·s)²): one third at the centre. Closed form.
    expect(evaluated(stage, {}).results['peak']!.value).toBeCloseTo(1 / 3, 9)
  })

  it('takes the output asked for, the first one otherwise', () => {
    const values = defaultValues(stage)
    const f = 1 / (2 * Math.PI * 10e3 * 10e-9)
    expect(stageResponse(stage, values, {}, 'out', [f]).re[0]).toBeCloseTo(1 / 3, 9)
    expect(stage.plot.output).toBe('mid')
  })
})
