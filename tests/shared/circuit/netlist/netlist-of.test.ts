import { describe, expect, it } from 'vitest'
import { readCircuit } from '#shared/circuit/grammar/read-circuit'
import type { Netlist } from '#shared/circuit/netlist/netlist'
import { netlistOf } from '#shared/circuit/netlist/netlist-of'
import { valueOf } from '#shared/problems'
import { CIRCUIT_TEXTS, CIRCUIT_TEXT_NAMES } from '../../../support/circuit-texts'
import { netlistOfCheck } from '../../../support/circuits'

const netlist = (...lines: string[]) => valueOf(netlistOf(valueOf(readCircuit(lines.join('\n')))))
const problems = (...lines: string[]) => {
  const reading = netlistOf(valueOf(readCircuit(lines.join('\n'))))
  return reading.ok ? [] : reading.problems
}
/** Cards such as `R1 in a`, `U1 out p n`, to compare by. */
const cards = ({ elements }: Netlist) =>
  elements.map((one) =>
    one.kind === 'opamp' ? `${one.ref} ${one.out} ${one.plus} ${one.minus}` : `${one.ref} ${one.a} ${one.b}`,
  )

/** Every pin with the node it is on; a passive part may lie either way round. */
function renaming(drawn: Netlist, wanted: Netlist): Map<string, string> | null {
  const byRef = new Map(drawn.elements.map((one) => [one.ref, one]))
  const attempt = (k: number, map: Map<string, string>): Map<string, string> | null => {
    const want = wanted.elements[k]
    if (!want) return map
    const got = byRef.get(want.ref)
    if (got?.kind !== want.kind) return null
    const pairings: [string, string][][] =
      got.kind === 'opamp' && want.kind === 'opamp'
        ? [
            [
              [got.plus, want.plus],
              [got.minus, want.minus],
              [got.out, want.out],
            ],
          ]
        : got.kind !== 'opamp' && want.kind !== 'opamp'
          ? [
              [
                [got.a, want.a],
                [got.b, want.b],
              ],
              [
                [got.a, want.b],
                [got.b, want.a],
              ],
            ]
          : []
    for (const pairs of pairings) {
      const next = new Map(map)
      const fits = pairs.every(([from, to]) => {
        if (next.has(from)) return next.get(from) === to
        if ([...next.values()].includes(to)) return false
        next.set(from, to)
        return true
      })
      const done = fits ? attempt(k + 1, next) : null
      if (done) return done
    }
    return null
  }
  const fixed = new Map([
    ['0', '0'],
    ['in', 'in'],
    ['out', 'out'],
  ])
  return drawn.elements.length === wanted.elements.length ? attempt(0, fixed) : null
}

// Source: the `netlist.ideal` cards of tests/checks/circuits, which ngspice-39 ran.
describe.each(CIRCUIT_TEXT_NAMES)('%s', (name) => {
  const { text, check } = CIRCUIT_TEXTS[name]
  const drawn = netlist(text)
  const wanted = netlistOfCheck(check)

  it('has the designators and nodes of the cards', () => {
    expect(drawn.elements.map((one) => one.ref).sort()).toEqual(wanted.elements.map((one) => one.ref).sort())
    expect(renaming(drawn, wanted)).not.toBeNull()
    expect(new Set(drawn.nodes).size).toBe(new Set(wanted.nodes).size)
  })

  it('has one input and one output against ground', () => {
    expect(drawn.inputs).toEqual([{ name: 'in', plus: 'in', minus: '0' }])
    expect(drawn.outputs).toEqual([{ name: 'out', plus: 'out', minus: '0' }])
  })
})

it('tells circuits of the same parts apart', () => {
  const turned = CIRCUIT_TEXTS['lp1-ni'].text.replace('- 12,4 + 12,2', '- 12,2 + 12,4')
  expect(renaming(netlist(turned), netlistOfCheck('lp1-noninverting-gain'))).toBeNull()
})

describe('what is joined', () => {
  const frame = ['input in 1,5', 'R R1 1,5 4,5', 'output out 9,5', 'R R2 9,5 9,8', 'ground 9,8']

  it('joins a wire end that lies on another run', () => {
    const tee = netlist(...frame, 'wire 4,5 9,5', 'C C1 6,2 8,2', 'wire 6,2 6,5', 'wire 8,2 11,2', 'ground 11,2')
    expect(cards(tee)).toContain('C1 out 0')
  })

  it('does not join two runs that cross', () => {
    const crossed = netlist(
      ...frame,
      'wire 4,5 9,5',
      'wire 6,3 6,7',
      'L L1 6,7 6,9',
      'ground 6,9',
      'C C1 6,1 6,3',
      'wire 6,1 1,1 1,5',
    )
    expect(cards(crossed)).toEqual(['R1 in out', 'R2 out 0', 'L1 a 0', 'C1 in a'])
  })

  it('joins where a crossing wire has a corner or a pin lies on a run', () => {
    expect(
      cards(
        netlist(
          ...frame,
          'wire 4,5 9,5',
          'wire 6,3 6,5 6,7',
          'L L1 6,7 6,9',
          'ground 6,9',
          'C C1 6,1 6,3',
          'wire 6,1 1,1 1,5',
        ),
      ),
    ).toEqual(['R1 in out', 'R2 out 0', 'L1 out 0', 'C1 in out'])
    expect(cards(netlist(...frame, 'wire 4,5 9,5', 'L L1 6,5 6,9', 'ground 6,9'))).toContain('L1 out 0')
  })

  it('joins points far apart that have one name', () => {
    expect(
      cards(
        netlist(
          'input in 1,1',
          'R R1 1,1 4,1',
          'name x 4,1',
          'wire 4,1 5,1',
          'output out 5,1',
          'C C1 8,4 8,7',
          'wire 8,4 9,4',
          'name x 9,4',
          'ground 8,7',
        ),
      ),
    ).toEqual(['R1 in x', 'C1 x 0'])
  })
})

describe('names of nodes', () => {
  it('takes port names, given names, n and p of op-amps, then letters', () => {
    expect(cards(netlist(CIRCUIT_TEXTS['lp2-mfb'].text))).toEqual([
      'R1 in a',
      'R2 a out',
      'R3 a n',
      'C1 a 0',
      'C2 n out',
      'U1 out 0 n',
    ])
    expect(cards(netlist(CIRCUIT_TEXTS['lp2-sku'].text))).toEqual([
      'R1 in a',
      'R2 a p',
      'C1 a out',
      'C2 p 0',
      'U1 out p out',
    ])
    expect(cards(netlist(CIRCUIT_TEXTS['hp1-inv'].text, 'name m 5,4'))).toEqual([
      'Ri in m',
      'Ci m n',
      'Rf n out',
      'U1 out 0 n',
    ])
  })

  it('numbers the inputs of several op-amps', () => {
    const two = netlist(
      CIRCUIT_TEXTS['lp1-inv'].text,
      'grid 40 x 11',
      'R R5 19,6 22,6',
      'opamp U2 - 24,6 + 24,8 out 28,7',
      'wire 22,6 24,6',
      'R R6 24,4 28,4',
      'wire 24,4 24,6',
      'wire 28,4 28,7',
      'ground 24,8',
      'output second 28,7',
    )
    expect(cards(two).slice(-2)).toEqual(['U2 second 0 n2', 'R6 n2 second'])
    expect(two.outputs.map((one) => one.name)).toEqual(['out', 'second'])
  })

  it('names the sides of a pair after it', () => {
    const pair = netlist(
      'input in + 1,1 - 1,6',
      'R R1 1,1 4,1',
      'R R2 4,1 4,3',
      'R R3 4,3 4,6',
      'wire 1,6 4,6',
      'wire 4,3 6,3',
      'ground 6,3',
      'output out + 4,1 - 4,6',
    )
    expect(pair.inputs).toEqual([{ name: 'in', plus: 'in+', minus: 'in-' }])
    expect(pair.outputs).toEqual([{ name: 'out', plus: 'out+', minus: 'in-' }])
  })
})

describe('references and supplies', () => {
  const half = ['input in 1,1', 'R R1 1,1 4,1', 'output out 4,1', 'R R2 4,1 4,4']

  it('puts a reference and a supply at ground for signals', () => {
    expect(netlist(...half, 'reference Vref 4,4')).toMatchObject({
      signalGrounds: ['Vref'],
      nodes: expect.arrayContaining(['Vref']),
    })
    expect(netlist(...half, 'supply VCC 4,4').signalGrounds).toEqual(['VCC'])
  })

  it('holds a reference through its resistor, drawn or not', () => {
    const held = netlist(...half, 'reference Vref 4,4 through Rv')
    expect(held.signalGrounds).toEqual([])
    expect(cards(held)).toContain('Rv Vref 0')
    expect(
      cards(netlist(...half, 'reference Vref 4,4 through Rv', 'R Rv 4,4 4,7', 'ground 4,7')).filter((one) =>
        one.startsWith('Rv'),
      ),
    ).toEqual(['Rv Vref 0'])
  })

  it('leaves supply pins out of the signal circuit', () => {
    const text = CIRCUIT_TEXTS['lp1-inv'].text.replace('out 15,6', 'out 15,6 supply 13,4 13,8')
    const powered = netlist(text, 'supply V+ 13,4', 'supply V- 13,8')
    expect(powered.nodes).not.toContain('V+')
    expect(powered.signalGrounds).toEqual([])
  })
})

describe('what makes no circuit', () => {
  const half = ['input in 1,1', 'R R1 1,1 4,1', 'output out 4,1', 'R R2 4,1 4,4', 'ground 4,4']
  it.each([
    [[...half, 'wire 1,1 1,3 2,3', 'wire 2,3 2,1', 'wire 2,1 4,1'], 2, /Both pins of R1 are joined/],
    [[...half, 'wire 4,4 7,4', 'name x 7,4'], 7, /x is joined to ground/],
    [[...half, 'reference Vref 4,1', 'name x 4,1'], 7, /x is joined to Vref/],
    [[...half, 'input b 1,1'], 6, /The inputs in and b are joined/],
    [[...half, 'output b 4,4'], 6, /The output b is joined to ground/],
    [['input in 1,1', 'R R1 1,1 4,1', 'output out 4,1'], 1, /Nothing is joined to ground/],
    [
      [
        ...half,
        'opamp U1 - 8,1 + 8,3 out 12,2',
        'wire 4,1 8,1',
        'wire 12,2 12,5',
        'ground 12,5',
        'wire 8,3 8,5',
        'ground 8,5',
      ],
      6,
      /output of U1 is joined to ground/,
    ],
    [
      [...half, 'opamp U1 - 8,1 + 8,3 out 12,2', 'wire 4,1 8,1 8,3', 'wire 12,2 13,2', 'output b 13,2'],
      6,
      /Both inputs of U1 are joined/,
    ],
  ])('%j', (lines, line, sentence) => {
    const found = problems(...lines)
    expect(found.map((one) => one.detail).join('\n')).toMatch(sentence)
    expect(found.find((one) => sentence.test(one.detail))).toMatchObject({ code: 'circuit-not-read', line, column: 1 })
  })

  it('lets a follower stand without a ground symbol', () => {
    expect(
      problems(
        'input in 1,3',
        'wire 1,3 4,3',
        'opamp U1 - 4,1 + 4,3 out 8,2',
        'wire 4,1 4,0 8,0 8,2',
        'output out 8,2',
      ),
    ).toEqual([])
  })

  it('finds the joints of the largest text within a second', () => {
    const zigzag = Array.from({ length: 8000 }, (_, k) => (k % 2 ? '0,200' : '0,0')).join(' ')
    const circuit = valueOf(
      readCircuit(['input in 0,0', `wire ${zigzag}`, 'R R1 0,200 3,200', 'ground 3,200', 'output out 0,0'].join('\n')),
    )
    const before = performance.now()
    expect(netlistOf(circuit).ok).toBe(true)
    expect(performance.now() - before).toBeLessThan(1000)
  })
})
