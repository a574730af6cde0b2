import { describe, expect, it } from 'vitest'
import type { Problem } from '#shared/problems'
import { valueOf } from '#shared/problems'
import { FIGURE_WORDS, readFigure } from '#shared/stage/figure'
import { defaultValues, evaluateStage, nothingAsked, readStage, selfCheck, stageResponse } from '#shared/stage/index'
import { evaluated } from '../../support/stages'

const CIRCUIT = ['input in 1,3', 'wire 1,3 2,3', 'R R1 2,3 5,3', 'C C1 5,3 5,6', 'ground 5,6', 'output out 5,3']
const PARTS = ['parts:', '  R1: { default: 10k }', '  C1: { default: 10n }']

const read = (calculator: string[], circuit = CIRCUIT) =>
  readStage({ circuit: circuit.join('\n'), circuitLine: 10, calculator: calculator.join('\n'), calculatorLine: 20 })
const problemsOf = (calculator: string[], circuit = CIRCUIT): Problem[] => {
  const reading = read(calculator, circuit)
  return reading.ok ? [] : reading.problems
}
const details = (calculator: string[], circuit = CIRCUIT) => problemsOf(calculator, circuit).map((one) => one.detail)

describe('problems', () => {
  it('are told all at once, each with line and column of the page', () => {
    const problems = problemsOf([
      'parts:', // 20
      '  R1: { default: 10kHz }', // 21
      '  C1: { default: 10n, from: 1u, to: 1n }', // 22
      '  R2: { default: 1k }', // 23
      'results:', // 24
      '  f_c: { formula: 1/(2*pi*R1*C9), unit: Hz, meaning: corner }', // 25
      '  x: { formula: R1*C1, unit: Hz, meaning: wrong dimension }', // 26
      '  y: { meaning: neither formula nor is }', // 27
      '  z: { meaning: m, is: loudest frequency }', // 28
      'limits:', // 29
      '  - { level: warning, when: R1 + C1 > 0, say: "Never." }', // 30
      '  - { level: note, when: R1, say: "Never." }', // 31
    ])
    expect(problems.map((one) => one.line)).toEqual(expect.arrayContaining([21, 22, 23, 25, 26, 27, 28, 30, 31]))
    const places = problems.map((one) => [one.line, one.column])
    expect(places).toContainEqual([21, 18])
    expect(places).toContainEqual([22, 29])
    expect(places).toContainEqual([25, 30])
    expect(places).toContainEqual([26, 17])
    for (const one of problems) expect(one.detail).toMatch(/[.?]$/)
  })

  it('of both texts come together', () => {
    const problems = problemsOf(['parts: ['], ['input in 1,3', 'X X1 2,3 4,3'])
    expect(problems.map((one) => one.line)).toEqual([11, 20])
  })

  it('of the wrong shape are placed and told in words', () => {
    expect(problemsOf(['parts: 5'])).toMatchObject([{ line: 20, column: 8 }])
    expect(problemsOf([...PARTS, 'results: [a]'])).toMatchObject([{ line: 23, column: 10 }])
    expect(problemsOf([...PARTS, 'colour: red']).length).toBe(1)
    expect(problemsOf([]).length).toBeGreaterThan(0)
    expect(problemsOf(['just text'])).toMatchObject([{ line: 20, column: 1 }])
    for (const calculator of [['parts: 5'], ['- a'], ['null'], ['0'], ['"x"'], ['parts: {}'], ['parts: { R1: ~ }']])
      for (const one of problemsOf(calculator)) expect(one.detail).toMatch(/[.?]$/)
  })
})

describe('parts', () => {
  it('need one entry each, of the kind drawn', () => {
    expect(details(['parts:', '  R1: { default: 1k }'])).toEqual([
      'C1 is drawn in the circuit and has no entry under parts.',
    ])
    expect(details([...PARTS, '  R7: { default: 1k }']).join()).toContain('R7 is not a part of this circuit.')
    expect(details(['parts:', '  R1: { default: 10n, kind: capacitor }', '  C1: { default: 10n }']).join()).toContain(
      'R1 is drawn as a resistor; R1 is a capacitor.',
    )
    expect(details(['parts:', '  R1: {}', '  C1: { default: 10n }'])).toEqual([
      'R1 needs a default value, such as default: 10k.',
    ])
  })

  it('may not be claimed twice', () => {
    const said = details(['parts:', '  RX: { of: [R1, R1], default: 1k }', '  C1: { default: 10n }'])
    expect(said.join()).toContain('R1 already belongs to RX.')
    expect(details([...PARTS, '  RX: { of: [R1, C1], default: 1k }']).join()).toMatch(/already belongs to/)
  })

  it('refuse a tolerance or drift that is none', () => {
    const withPart = (more: string) => details(['parts:', `  R1: { default: 10k, ${more} }`, '  C1: { default: 10n }'])
    for (const more of [
      'tolerance: 1k',
      'tolerance: -1 %',
      'drift: 25',
      'drift: fast',
      'series: E95',
      'from: 0',
      'default: 0',
      'default: 1e300',
      'to: 1e13',
    ])
      expect(withPart(more).length, more).toBeGreaterThan(0)
    expect(withPart('tolerance: 0.1 %, drift: ±25 ppm/K, series: E192')).toEqual([])
  })

  it('default to the house range, series and tolerance', () => {
    const stage = valueOf(read(PARTS))
    expect(stage.parts[0]).toMatchObject({ series: 'E96', from: 100, to: 1e6, tolerance: 0.01 })
    expect(stage.parts[1]).toMatchObject({ series: 'E12', from: 100e-12, to: 1e-6, tolerance: 0.05 })
  })
})

describe('matched parts', () => {
  const circuit = [
    ...['input in 1,3', 'wire 1,3 2,3', 'R Ra 2,3 5,3', 'R Rb 5,3 8,3', 'C Ca 5,3 5,6', 'C Cb 8,3 8,6'],
    ...['ground 5,6', 'ground 8,6', 'output mid 5,3', 'output out 8,3'],
  ]
  const calculator = [
    ...['parts:', '  R: { of: [Ra, Rb], default: 10k }', '  C: { of: [Ca, Cb], default: 10n }', 'results:'],
    ...['  Q: { formula: 1/3, meaning: quality, is: quality factor, output: out }', 'response:'],
    ...['  out: 1/(1 + 3*s*R*C + (s*R*C)^2)', '  mid: (1 + s*R*C)/(1 + 3*s*R*C + (s*R*C)^2)'],
  ]
  const stage = valueOf(read(calculator, circuit))

  it('have one value for all of them, in the circuit too', () => {
    // Two equal RC in a row: 1/(1 + 3sRC + (sRC)²). Textbook.
    const { re, im } = stageResponse(stage, { R: 20e3, C: 5e-9 }, {}, 'out', [1 / (2 * Math.PI * 1e-4)])
    expect(re[0]).toBeCloseTo(0, 9)
    expect(im[0]).toBeCloseTo(-1 / 3, 9)
    expect(selfCheck(stage, defaultValues(stage)).outcome).toBe('agrees')
  })

  it('are no longer entries by their own designators', () => {
    expect(details([...calculator.slice(0, 3), '  Ra: { default: 1k }'], circuit).join()).toContain(
      'Ra already belongs to R.',
    )
  })

  it('refuse an output that is not drawn, wherever it is named', () => {
    for (const more of [
      ['results:', '  a: { meaning: m, is: gain at 0 Hz, output: side }'],
      ['response: { side: 1 }'],
      ['plots: { output: side }'],
    ])
      expect(details([...calculator.slice(0, 3), ...more], circuit)).toEqual([
        'side is not an output of this circuit. It has mid, out.',
      ])
  })
})

describe('a reference through a part', () => {
  const circuit = [
    ...[
      'input in 1,3',
      'wire 1,3 2,3',
      'R R1 2,3 5,3',
      'C C1 5,3 5,6',
      'reference Vref 5,6 through Rv',
      'output out 5,3',
    ],
  ]

  it('counts as a resistor to ground for signals, with an entry of its own', () => {
    expect(details(PARTS, circuit)).toEqual(['Rv is drawn in the circuit and has no entry under parts.'])
    const stage = valueOf(
      read([...PARTS, '  Rv: { default: 100 }', 'response: (1 + s*Rv*C1)/(1 + s*(R1 + Rv)*C1)'], circuit),
    )
    expect(selfCheck(stage, defaultValues(stage)).outcome).toBe('agrees')
  })
})

describe('the words of is:', () => {
  const isResult = (name: string) => name === 'f_0'

  it.each(FIGURE_WORDS)('are read: %s', (words) => {
    expect(readFigure(words, isResult).ok).toBe(true)
    expect(readFigure(`  ${words.replaceAll(' ', '   ')} `, isResult).ok).toBe(true)
  })

  it.each([
    'half power frequency',
    'Half-power frequency',
    'middle half-power frequency',
    'natural frequency of pair 0',
    'natural frequency of pair 10',
    'quality factor of pair',
    'ripple edge',
    'ripple edge -1 dB',
    'gain',
    'gain at',
    'gain at f_9',
    'gain at -1 Hz',
    'gain at 3 kΩ',
    'gain at constructor',
    'input impedance at NaN',
    'is',
    '',
    'x'.repeat(100_000),
    'gain at ' + '9'.repeat(100_000),
  ])('are refused with the list of those known: %.40s', (words) => {
    const reading = readFigure(words, isResult)
    expect(reading.ok).toBe(false)
    if (reading.ok) return
    expect(reading.problems[0].detail).toContain('half-power frequency')
    expect(reading.problems[0].detail.length).toBeLessThan(700)
  })
})

describe('every figure that can be found', () => {
  it('is a number on a circuit that has it, and no number on one that has not', () => {
    const figures = FIGURE_WORDS.filter((words) => !words.includes('f_0'))
    const stage = valueOf(
      read([...PARTS, 'results:', ...figures.map((words, k) => `  r${k}: { meaning: m, is: ${words} }`)]),
    )
    const { results } = evaluateStage(stage, nothingAsked(stage))
    const value = (words: (typeof FIGURE_WORDS)[number]) => results[`r${figures.indexOf(words)}`]!.value
    // RC low-pass of 10 kΩ and 10 nF. Textbook.
    const corner = 1 / (2 * Math.PI * 1e-4)
    expect(value('half-power frequency')).toAgreeWith(corner, { relative: 1e-9 })
    expect(value('upper half-power frequency')).toAgreeWith(corner, { relative: 1e-9 })
    expect(value('lower half-power frequency')).toBeNaN()
    expect(value('gain at 0 Hz')).toBeCloseTo(1, 12)
    expect(value('gain at 1 kHz')).toAgreeWith(1 / Math.hypot(1, 1e3 / corner), { relative: 1e-9 })
    expect(value('gain at high frequency')).toBe(0)
    expect(value('ripple edge 0.5 dB')).toAgreeWith(corner * Math.sqrt(10 ** 0.05 - 1), { relative: 1e-9 })
    expect(value('output impedance at 10 kHz')).toAgreeWith(10e3 / Math.hypot(1, 1e4 / corner), { relative: 1e-9 })
    for (const words of ['natural frequency', 'quality factor', 'notch frequency', 'notch depth'] as const)
      expect(value(words), words).toBeNaN()
  })
})

describe('formulas that need each other', () => {
  it('are refused, the ring named', () => {
    const said = details([
      ...[...PARTS, 'results:', '  a: { formula: b, meaning: m }', '  b: { formula: c + 1, meaning: m }'],
      '  c: { formula: 2*a, meaning: m }',
    ])
    expect(said).toEqual(['The formulas of a → b → c → a need each other.'])
    expect(details([...PARTS, 'results:', '  a: { formula: a + 1, meaning: m }']).join()).toMatch(
      /itself|need each other/,
    )
  })

  it('through the frequency of a figure count as well', () => {
    const said = details([
      ...[...PARTS, 'results:', '  g: { meaning: m, is: gain at f_a }'],
      '  f_a: { formula: g*1 Hz, unit: Hz, meaning: m }',
    ])
    expect(said.join()).toContain('need each other')
    expect(details([...PARTS, 'results:', '  g: { meaning: m, is: gain at g }']).length).toBeGreaterThan(0)
  })

  it('in any order but a ring are computed in theirs', () => {
    const stage = valueOf(
      read([
        ...PARTS,
        'results:',
        '  a: { formula: 2*b, unit: s, meaning: m }',
        '  b: { formula: R1*C1, unit: s, meaning: m }',
      ]),
    )
    expect(evaluated(stage, {}).results['a']!.value).toAgreeWith(2e-4, { relative: 1e-12 })
    expect(Object.keys(evaluated(stage, {}).results)).toEqual(['a', 'b'])
  })
})

describe('limits', () => {
  const circuit = ['input in 1,3', 'wire 1,3 2,3', 'opamp U1 - 5,5 + 5,3 out 9,4', 'wire 2,3 5,3', 'wire 5,5 5,7 9,7 9,4', 'R R1 9,4 12,4', 'ground 12,4', 'output out 9,4'] // prettier-ignore
  const parts = ['parts:', '  R1: { default: 10k }']

  it('that need data of an op-amp rest until one is chosen', () => {
    const stage = valueOf(
      read([...parts, 'limits:', '  - { level: warning, when: GBW(U1) < 1 MHz, say: "Slow." }'], circuit),
    )
    expect(stage.limits).toMatchObject([{ level: 'warning', applies: null }])
    expect(evaluated(stage, {}).limits).toEqual([])
  })

  it('use conditions, and rest while these are not stated', () => {
    const stage = valueOf(
      read(
        [...parts, 'limits:', '  - { level: not allowed, when: loadOhm < 2k, say: "{loadOhm} is too low." }'],
        circuit,
      ),
    )
    expect(evaluated(stage, {}).limits).toEqual([])
    expect(evaluated(stage, { conditions: { loadOhm: 600 } }).limits).toMatchObject([
      { level: 'not allowed', say: expect.stringMatching(/^600\.0.Ω is too low\.$/) },
    ])
  })

  it('leave braces that name nothing as they are', () => {
    const stage = valueOf(
      read([...parts, 'limits:', '  - { level: note, when: R1 > 0, say: "{x} {constructor} {R1}" }'], circuit),
    )
    expect(evaluated(stage, {}).limits[0]!.say).toMatch(/^\{x\} \{constructor\} 10\.00.kΩ$/)
  })

  it('refuse an unknown level', () => {
    expect(problemsOf([...parts, 'limits:', '  - { level: panic, when: R1 > 0, say: x }'], circuit)).toMatchObject([
      { line: 23 },
    ])
  })
})

describe('names', () => {
  it.each(['s', 'pi', 'e', 'sourceOhm', 'R1', 'sqrt', 'par', 'i', 'and', 'not'])(
    '%s cannot be a result without being refused or meant',
    (name) => {
      const reading = read([
        ...PARTS,
        'results:',
        `  ${name}: { formula: R1*C1, unit: s, meaning: m }`,
        `  t: { formula: "2*${name}", unit: s, meaning: m }`,
      ])
      if (!reading.ok) {
        for (const one of reading.problems) expect(one.detail).toMatch(/[.?]$/)
        return
      }
      // Where the name is taken, it means the result and nothing else.
      expect(evaluated(reading.value, {}).results['t']!.value).toAgreeWith(2e-4, { relative: 1e-12 })
    },
  )

  it.each(['constructor', 'toString', 'hasOwnProperty', 'prototype', 'valueOf'])(
    'of every object are plain names: %s',
    (name) => {
      const stage = valueOf(read([...PARTS, 'results:', `  ${name}: { formula: R1*C1, unit: s, meaning: m }`]))
      expect(evaluated(stage, {}).results[name]!.value).toAgreeWith(1e-4, { relative: 1e-12 })
      expect(evaluated(valueOf(read(PARTS)), {}).results[name as never]).toBe(
        Object.getOwnPropertyDescriptor({}, name)?.value ?? ({} as never)[name],
      )
    },
  )

  it('__proto__ is refused', () => {
    expect(details([...PARTS, 'results:', '  __proto__: { formula: 1, meaning: m }'])).toEqual([
      'The name __proto__ cannot be used.',
    ])
  })
})

describe('recipes', () => {
  const results = [
    'results:',
    '  f_c: { formula: 1/(2*pi*R1*C1), unit: Hz, meaning: corner, is: half-power frequency }',
  ]
  const recipe = (...lines: string[]) =>
    details([...PARTS, ...results, 'sizing:', '  targets: { f_c: 1 kHz }', ...lines])

  it('refuse what does not fit the parts and results', () => {
    expect(recipe('  steps: [ { part: R9, formula: 1 kΩ } ]').join()).toContain('R9 is not a part')
    expect(recipe('  steps: [ { part: R1, formula: f_c } ]').join()).toMatch(/wanted here/)
    expect(recipe('  free: { R1: { start: 1k } }', '  steps: [ { part: R1, formula: 1k } ]')).toEqual([
      'R1 is sized twice.',
    ])
    expect(recipe('  steps: [ { part: R1, formula: 1k, round: sideways } ]').length).toBe(1)
    expect(
      recipe('  steps: [ { part: R1, formula: 1k, require: { that: f_c > 1, say: x, target: Q } } ]').join(),
    ).toContain('Q is not a target')
    expect(
      recipe('  free: { C1: { start: "1/(2*pi*f_c*10k)" } }', '  steps: [ { part: R1, formula: "1/(2*pi*f_c*C1)" } ]'),
    ).toEqual([])
  })

  it('refuse a target of zero, which no error can be relative to', () => {
    expect(details([...PARTS, ...results, 'sizing:', '  targets: { f_c: 0 Hz }'])).toEqual(['f_c must be above zero.'])
    expect(details([...PARTS, 'results: { K: { formula: 1, meaning: m } }', 'sizing: { targets: { K: 0 } }'])).toEqual([
      'K cannot be asked to be zero.',
    ])
  })

  it('refuse a target that is no result, or of another unit', () => {
    expect(details([...PARTS, ...results, 'sizing:', '  targets: { g: 1 }']).join()).toContain('g is not a result')
    expect(details([...PARTS, ...results, 'sizing:', '  targets: { f_c: 1 kΩ }']).length).toBe(1)
  })
})

describe('the range of the plot', () => {
  it.each(['{ from: 0 Hz }', '{ to: 0 }', '{ from: 2 kHz, to: 1 kHz }', '{ from: 1 kΩ }', '{ from: -1 Hz }'])(
    'that cannot be drawn is refused: %s',
    (plots) => {
      expect(details([...PARTS, `plots: ${plots}`])).toHaveLength(1)
    },
  )
})
