import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readCircuit } from '#shared/circuit/grammar/read-circuit'
import { writeCircuit } from '#shared/circuit/grammar/write-circuit'
import { valueOf } from '#shared/problems'
import { CIRCUIT_TEXTS, CIRCUIT_TEXT_NAMES } from '../../../support/circuit-texts'

/** A sound divider, to which a case adds the line under test. */
const SOUND = ['input in 1,2', 'R R1 1,2 4,2', 'R R2 4,2 4,5', 'ground 4,5', 'output out 4,2']
const problemsOf = (lines: string[]) => {
  const reading = readCircuit(lines.join('\n'))
  return reading.ok ? [] : reading.problems
}
const withLine = (line: string) => problemsOf([...SOUND, line])
const withoutSpans = (circuit: object) => JSON.parse(JSON.stringify(circuit, (k, v) => (k === 'span' ? undefined : v)))

describe('what is read', () => {
  it('reads parts, ports, wires and symbols with their place in the text', () => {
    const circuit = valueOf(
      readCircuit(
        [
          '# a follower with everything around it',
          'format 1',
          'grid 24 x 12',
          '',
          'input in + 1,4 - 1,8   # a pair',
          '  L Lx 3,4 6,4 label below',
          'wire 1,4 3,4',
          'wire 1,8 3,8 3,10',
          'reference Vref 3,10 through Rv',
          'opamp U1 - 8,6 + 8,4 out 12,5 supply 10,3 10,7',
          'wire 6,4 8,4',
          'wire 8,6 7,6 7,9 13,9 13,5 12,5',
          'supply V+ 10,3',
          'supply V- 10,7',
          'name p 7,4',
          'output lp 13,5',
          'output raw + 6,4 - 3,8',
        ].join('\r\n'),
      ),
    )
    expect(circuit.grid).toEqual({ width: 24, height: 12 })
    expect(circuit.parts[0]).toEqual({
      kind: 'inductor',
      ref: 'Lx',
      pins: [
        { x: 3, y: 4 },
        { x: 6, y: 4 },
      ],
      label: 'below',
      span: { line: 6, column: 3, endColumn: 27 },
    })
    expect(circuit.parts[1]).toMatchObject({ minus: { x: 8, y: 6 }, plus: { x: 8, y: 4 }, out: { x: 12, y: 5 } })
    expect(circuit.ports.map((port) => [port.role, port.name, port.minus !== undefined])).toEqual([
      ['input', 'in', true],
      ['output', 'lp', false],
      ['output', 'raw', true],
    ])
    expect(circuit.references).toMatchObject([{ name: 'Vref', through: 'Rv' }])
    expect(circuit.supplies.map((one) => one.name)).toEqual(['V+', 'V-'])
  })

  it('takes an op-amp that points left, minus above or below', () => {
    const base = ['input in 9,2', 'wire 9,2 8,2', 'wire 8,4 8,6 4,6 4,3', 'output out 4,3']
    expect(problemsOf([...base, 'opamp U1 - 8,4 + 8,2 out 4,3'])).toEqual([])
    expect(problemsOf([...base, 'opamp U1 - 8,2 + 8,4 out 4,3'])).toEqual([])
  })

  it('sizes the grid by what is drawn when none is given', () => {
    expect(valueOf(readCircuit(SOUND.join('\n'))).grid).toEqual({ width: 5, height: 6 })
  })

  it.each(CIRCUIT_TEXT_NAMES)('writes %s so that it reads back as the same circuit', (name) => {
    const circuit = valueOf(readCircuit(CIRCUIT_TEXTS[name].text))
    const written = writeCircuit(circuit)
    expect(withoutSpans(valueOf(readCircuit(written)))).toEqual(withoutSpans(circuit))
    expect(writeCircuit(valueOf(readCircuit(written)))).toBe(written)
  })
})

describe('what is refused', () => {
  it.each([
    ['wier 1,2 3,2', 1, /Did you mean wire\?/],
    ['triode T1 1,2 3,2', 1, /begins no statement\. format, grid/],
    ['R Rx 1,2', 9, /grid point, such as 3,6/],
    ['R Rx 1.5,2 4,2', 6, /grid point/],
    ['R Rx 1,2 201,2', 10, /from 0 to 200/],
    ['R Rx 1,2 3,4', 10, /lies aslant/],
    ['R Rx 1,2 2,2', 10, /less than 2 steps/],
    ['R C7 1,2 4,2', 3, /begins with R/],
    ['C Cx 1,2 1,5 label beside', 14, /label above/],
    ['C Cx 1,2 1,5 label left 3', 25, /too much/],
    ['wire 1,2 3,4', 10, /give the corner/],
    ['wire 1,2', 9, /two points or more/],
    ['wire 1,2 1,2', 10, /stands still/],
    ['input 0 1,2', 7, /kept for ground/],
    ['output 0 1,2', 8, /kept for ground/],
    ['name 0 1,2', 6, /kept for ground/],
    ['input i-n 1,2', 7, /letters and digits/],
    ['input b + 1,2', 14, /A pair is written/],
    ['opamp A1 - 1,2 + 1,4 out 5,3', 7, /begins with U/],
    ['opamp U1 1,2 1,4 5,3', 10, /written as/],
    ['opamp U1 - 1,2 + 1,4 out 5,4', 12, /half-way/],
    ['opamp U1 - 1,2 + 2,4 out 5,3', 12, /above each other/],
    ['opamp U1 - 1,2 + 1,4 out 3,3', 12, /3 steps or more/],
    ['opamp U1 - 1,2 + 1,4 out 5,3 supply 3,2', 40, /negative supply/],
    ['ground 1,2,3', 8, /grid point/],
    ['reference Vref 1,2 through', 27, /the resistor/],
    ['reference Vref 1,2 across Rv', 20, /too much/],
    ['format 2', 8, /Format 1 is read/],
    ['grid 20 by 11', 6, /grid 20 x 11/],
    ['grid 20 x 1e3', 6, /4 to 200/],
  ])('%s', (line, column, sentence) => {
    const [problem, ...more] = withLine(line)
    expect(problem).toMatchObject({ code: 'circuit-not-read', line: 6, column })
    expect(problem!.detail).toMatch(sentence)
    expect(more).toEqual([])
  })

  it.each([
    ['R R1 4,2 7,2', /R1 stands already in line 2/],
    ['C C1 4,2 8,2', /The pin of C1 at 8,2 touches nothing/],
    ['wire 4,2 8,2', /The end of this wire at 8,2 touches nothing/],
    ['ground 9,9', /The ground at 9,9 touches nothing/],
    ['reference Vref 9,9', /The reference Vref at 9,9 touches nothing/],
    ['supply V+ 9,9', /The supply V\+ at 9,9 touches nothing/],
    ['name q 9,9', /The name q at 9,9 touches nothing/],
    ['output b 9,9', /The port b at 9,9 touches nothing/],
    ['output out 1,2', /two ports called out/],
    ['C C1 4,2 4,5', /C1 lies on top of R2/],
    ['C C1 2,2 4,2', /C1 lies on top of R1/],
    ['grid 4 x 4', /4,5 lies outside the grid of 4 x 4/],
  ])('%s, which only the whole circuit shows', (line, sentence) => {
    expect(
      withLine(line)
        .map((one) => one.detail)
        .join('\n'),
    ).toMatch(sentence)
  })

  it('tells all problems at once, in the order of the lines', () => {
    const found = problemsOf([
      'input in 1,2',
      'wier 1,2 3,2',
      'R R1 1,2 4,2',
      'R R1 4,2 9,9',
      'C C1 1,2 4,2',
      'ground x',
    ])
    expect(found.map(({ line, column }) => [line, column])).toEqual([
      [2, 1],
      [4, 10],
      [5, 1],
      [6, 8],
    ])
  })

  it('asks for an input and an output', () => {
    expect(problemsOf(['ground 1,1', 'R R1 1,1 4,1', 'R R2 1,1 4,1'].slice(0, 2)).map((one) => one.detail)).toEqual([
      'The circuit has no input: write “input in 1,6”.',
      'The circuit has no output: write “output out 18,7”.',
      'The pin of R1 at 4,1 touches nothing.',
    ])
  })

  it('refuses more than 400 parts and texts of more than 64 kB', () => {
    const ladder = Array.from(
      { length: 401 },
      (_, k) => `R R${k} ${k % 100},${3 * Math.floor(k / 100)} ${k % 100},${3 * Math.floor(k / 100) + 2}`,
    )
    expect(problemsOf([...SOUND.slice(0, 1), ...ladder]).some((one) => /at most 400 parts/.test(one.detail))).toBe(true)
    expect(problemsOf([`# ${'x'.repeat(64 * 1024)}`])[0]!.detail).toMatch(/at most 65536 characters/)
  })
})

describe('hostile text', () => {
  it('never throws, whatever is typed', () => {
    const word = fc.constantFrom(
      'R',
      'R1',
      'wire',
      'opamp',
      '1,2',
      '4,2',
      '-',
      '+',
      'out',
      'supply',
      '#',
      '\n',
      '__proto__',
    )
    fc.assert(
      fc.property(
        fc.oneof(
          fc.string(),
          fc.array(word).map((words) => words.join(' ')),
        ),
        (text) => {
          const reading = readCircuit(text)
          if (!reading.ok) for (const one of reading.problems) expect(one.line).toBeGreaterThan(0)
        },
      ),
    )
  })

  it('reads the largest text within a second', () => {
    const zigzag = Array.from({ length: 8000 }, (_, k) => (k % 2 ? '0,200' : '0,0')).join(' ')
    const before = performance.now()
    readCircuit(['input in 0,0', `wire ${zigzag}`, 'output out 0,200'].join('\n'))
    expect(performance.now() - before).toBeLessThan(1000)
  })
})
