import { describe, expect, it } from 'vitest'
import { prepareCircuit, response } from '#shared/analysis/nodal-analysis'
import type { Netlist } from '#shared/circuit/netlist/netlist'
import { ProblemError, valueOf } from '#shared/problems'
import { deckResponse } from '#shared/spice/deck-response'
import { readDeck } from '#shared/spice/read-deck'
import { writeDeck } from '#shared/spice/write-deck'
import { CHECK_CIRCUITS, netlistOfCheck, readCheck, valuesOfCheck } from '../../support/circuits'

const linesOf = (deck: string) => deck.trimEnd().split('\n')

// Source: the `netlist` cards of tests/checks/circuits, as ngspice-39 ran them.
describe.each(CHECK_CIRCUITS)('%s', (name) => {
  const { opamp, netlist: cards, response: wanted, outputs } = readCheck(name)
  const netlist = netlistOfCheck(name)
  const values = valuesOfCheck(name)
  const split = (lines: string[]) =>
    lines.map((card) => {
      const words = card
        .replace(/ noisy=0$/, '')
        .replace(/ 1k$/, ' 1000')
        .split(' ')
      return [...words.slice(0, -1), Number(Number(words.at(-1)).toPrecision(12))]
    })
  const amplifiers = Object.fromEntries(
    netlist.elements.flatMap(({ kind, ref }) =>
      kind === 'opamp' ? [[ref, { openLoopGain: opamp.A0, gbwHz: opamp.GBW_Hz }]] : [],
    ),
  )

  it('is written as the cards that were run, with ideal op-amps and with one pole', () => {
    const ideal = linesOf(writeDeck(netlist, values, { title: name })).slice(2, -1)
    expect(split(ideal)).toEqual(split(cards.ideal))
    const real = linesOf(writeDeck(netlist, values, { title: name, amplifiers })).slice(2, -1)
    expect(split(real)).toEqual(split(cards.one_pole))
  })
  it('is the same circuit when read again', () => {
    const deck = valueOf(readDeck(writeDeck(netlist, values, { sweep: { fromHz: 1, toHz: 1e6, perDecade: 10 } })))
    expect(deck.elements).toEqual(netlist.elements)
    expect(deck.values).toEqual(values)
    const real = valueOf(readDeck(writeDeck(netlist, values, { amplifiers })))
    for (const [label, node] of Object.entries(outputs)) {
      const direct = response(prepareCircuit(netlist, { amplifiers }), values, wanted.frequency_Hz, label)
      const again = deckResponse(real, { output: node }, wanted.frequency_Hz)
      expect(again.re).toAgreeWith(direct.re, { relative: 1e-9, absolute: 1e-15 })
      expect(again.im).toAgreeWith(direct.im, { relative: 1e-9, absolute: 1e-15 })
    }
  })
})

const follower: Netlist = {
  nodes: ['0', 'in', 'out'],
  elements: [
    { kind: 'resistor', ref: 'RL', a: 'out', b: '0' },
    { kind: 'opamp', ref: 'U1', plus: 'in', minus: 'out', out: 'out' },
  ],
  inputs: [{ name: 'in', plus: 'in', minus: '0' }],
  outputs: [{ name: 'out', plus: 'out', minus: '0' }],
  signalGrounds: [],
}

it.each([
  [{ openLoopGain: 1e3 }],
  [{ gbwHz: 1e6 }],
  [{ openLoopGain: 1e5, gbwHz: 1e6, secondPoleHz: 2e6, outputOhm: 100, inputFarad: 1e-12 }],
  [{ openLoopGain: Infinity, gbwHz: 1e6, outputOhm: 50 }],
])('writes the model of an op-amp with %j', (amplifier) => {
  const amplifiers = { U1: amplifier }
  const frequenciesHz = [10, 1e4, 1e6, 3e6, 1e7]
  const direct = response(prepareCircuit(follower, { amplifiers }), { RL: 600 }, frequenciesHz)
  const deck = valueOf(readDeck(writeDeck(follower, { RL: 600 }, { amplifiers })))
  const again = deckResponse(deck, { output: 'out' }, frequenciesHz)
  frequenciesHz.forEach((_, k) =>
    expect(Math.hypot(again.re[k]! - direct.re[k]!, again.im[k]! - direct.im[k]!)).toBeLessThan(1e-7),
  )
  expect(deck.noiseless.every((ref) => /^RU1[PQO]$/.test(ref))).toBe(true)
})

it('writes pairs, references, shorts, open resistors and controlled sources', () => {
  const netlist: Netlist = {
    nodes: ['0', 'in+', 'in-', 'V+', 'x', 'y'],
    elements: [
      { kind: 'resistor', ref: 'R1', a: 'in+', b: 'x' },
      { kind: 'resistor', ref: 'R2', a: 'in-', b: 'y' },
      { kind: 'resistor', ref: 'R3', a: 'x', b: 'V+' },
      { kind: 'capacitor', ref: 'C1', a: 'x', b: 'y' },
    ],
    inputs: [{ name: 'in', plus: 'in+', minus: 'in-' }],
    outputs: [{ name: 'out', plus: 'x', minus: 'y' }],
    signalGrounds: ['V+'],
    controlled: [{ ref: 'E1', a: 'y', b: '0', plus: 'x', minus: 'in-', gain: 2 }],
  }
  const values = { R1: 0, R2: Infinity, R3: 1e3, C1: 1e-9 }
  const options = { title: 'Pair', noiseless: ['R3', 'C1'], sweep: { fromHz: 10, toHz: 1e5, perDecade: 20 } }
  expect(linesOf(writeDeck(netlist, values, options))).toEqual([
    '* Pair',
    '* node in_p: in+',
    '* node in_n: in-',
    '* node V_p: V+',
    'Vin_p in_p 0 DC 0 AC 0.5 0',
    'Vin_n in_n 0 DC 0 AC 0.5 180',
    'VR1 in_p x 0',
    'R3 x V_p 1000 noisy=0',
    'C1 x y 1e-9',
    'E1 y 0 x in_n 2',
    'Vground1 V_p 0 0',
    '.ac dec 20 10 100000',
    '.print ac v(x,y)',
    '.end',
  ])
})

describe('names cannot smuggle commands', () => {
  const hostile = [
    'a\n.include /etc/passwd',
    'a\r.control\rshell x',
    '\u2028.lib x',
    '*',
    ';',
    '$',
    '{r}',
    "'",
    '"',
    '+',
    '.end',
    '0',
    'gnd',
    '00',
    'GND',
    '',
    '=1',
    'é',
    '__proto__',
    'a b c',
    '#',
    'x'.repeat(500),
    '\0',
  ]
  const cleanLine =
    /^(\* ?[\x20-\x7e]*|[RCLVE]\w+( \w+){2,4}( [-+.\w]+)?( AC [\d.]+ \d+)?( noisy=0)?|\.ac dec \d+ [\d.]+ [\d.]+|\.print ac( v\(\w+(,\w+)?\))+|\.end)$/
  it.each(hostile)('%j as title, node, part, port and op-amp', (name) => {
    const netlist: Netlist = {
      nodes: ['0', name === '0' ? 'n0' : name, 'out', 'OUT'],
      elements: [
        { kind: 'resistor', ref: `R${name}`, a: name, b: 'out' },
        { kind: 'resistor', ref: name, a: name, b: 'OUT' },
        { kind: 'capacitor', ref: `C${name}`, a: 'out', b: '0' },
        { kind: 'inductor', ref: 'RU1P', a: 'OUT', b: 'U1x' },
        { kind: 'opamp', ref: `U${name}`, plus: name, minus: 'U1x', out: 'U1x' },
      ],
      inputs: [{ name, plus: name, minus: '0' }],
      outputs: [{ name, plus: 'out', minus: name }],
      signalGrounds: [],
      controlled: [{ ref: name, a: 'c', b: '0', plus: name, minus: '0', gain: -2 }],
    }
    const values = Object.fromEntries([
      [`R${name}`, 1],
      [name, 2],
      [`C${name}`, 1e-9],
      ['RU1P', 1e-3],
    ])
    const text = writeDeck(netlist, values, {
      title: name,
      amplifiers: { [`U${name}`]: { openLoopGain: 1e5, gbwHz: 1e6 } },
      sweep: { fromHz: 1, toHz: 10, perDecade: 5 },
    })
    const lines = linesOf(text)
    for (const line of lines) expect(line).toMatch(cleanLine)
    expect(text.replace(/^\*.*/gm, '')).not.toMatch(/ 00+ | 00+$|[(,]0+[,)]/m)
    expect(lines[0]).toMatch(/^\*( |$)/)
    expect(lines.filter((line) => line.startsWith('.'))).toHaveLength(3)
    const deck = valueOf(readDeck(text))
    expect(deck.elements).toHaveLength(6)
    expect(deck.controlled).toHaveLength(3)
  })
})

it('names parts without value, values that are none, and inputs that are not there', () => {
  const netlist = netlistOfCheck('lp1-inverting')
  expect(() => writeDeck(netlist, { Ri: 1e4, Cf: 1e-9 })).toThrow('Rf has no value.')
  expect(() => writeDeck(netlist, { Ri: 1e4, Rf: -1, Cf: 1e-9 })).toThrow('Rf is -1; it takes a value from zero up.')
  expect(() => writeDeck(netlist, { Ri: 1e4, Rf: 1, Cf: NaN })).toThrow(ProblemError)
  expect(() => writeDeck(netlist, readCheck('lp1-inverting').parts, { input: 'x' })).toThrow('No input is called x.')
})
