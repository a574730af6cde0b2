import { describe, expect, it } from 'vitest'
import { response, prepareCircuit } from '#shared/analysis/nodal-analysis'
import { rationalTransferFunction } from '#shared/analysis/rational'
import { ProblemError, valueOf } from '#shared/problems'
import type { Deck } from '#shared/spice/deck'
import { deckNode, netlistOfDeck } from '#shared/spice/deck'
import { deckResponse } from '#shared/spice/deck-response'
import { DECK_CARDS_MAX, DECK_CHARS_MAX, readDeck } from '#shared/spice/read-deck'
import { CHECK_CIRCUITS, readCheck } from '../../support/circuits'

const deckOf = (...lines: string[]): Deck => valueOf(readDeck(lines.join('\n')))
const problemsOf = (...lines: string[]) => {
  const reading = readDeck(lines.join('\n'))
  return reading.ok ? [] : reading.problems
}
const at = (deck: Deck, output: string | [string, string], frequencyHz = 0) => {
  const { re, im } = deckResponse(deck, { output }, [frequencyHz])
  return { re: re[0]!, im: im[0]! }
}

// Source: each file's header: responses of ngspice-39 `.ac`; it states 1e-6·|H| + 1e-8·max|H|.
describe.each(CHECK_CIRCUITS)('the cards of %s', (name) => {
  const { netlist, outputs, response: wanted, header } = readCheck(name)
  const cases = Object.entries(outputs).flatMap(([label, node]) =>
    (['ideal', 'one_pole'] as const).map((model) => [label, node, model] as const),
  )
  it.each(cases)('give the response of ngspice at %s (%s), %s', (label, node, model) => {
    expect(header.tolerance['H, ideal op-amp, against a nullor or E gain 1e9']).toContain('1e-6*|H| + 1e-8*max|H|')
    const deck = deckOf(`* ${name}`, ...netlist.source, ...netlist[model], '.ac dec 10 1 1e6', '.end')
    const { re, im } = wanted[label]![model]
    const got = deckResponse(deck, { output: node }, wanted.frequency_Hz)
    const most = Math.max(...re.map((x, k) => Math.hypot(x, im[k]!)))
    re.forEach((_, k) => {
      const bound = 1e-6 * Math.hypot(re[k]!, im[k]!) + 1e-8 * most
      expect(Math.hypot(got.re[k]! - re[k]!, got.im[k]! - im[k]!)).toBeLessThanOrEqual(bound)
    })
  })
  it('are the same circuit without a title, in capitals and with CRLF', () => {
    const plain = [...netlist.source, ...netlist.one_pole]
    const loud = valueOf(readDeck(plain.join('\r\n').toUpperCase()))
    const output = Object.values(outputs)[0]!
    const [one, other] = [deckOf(...plain), loud].map((deck) => deckResponse(deck, { output }, wanted.frequency_Hz))
    expect(other).toEqual(one)
  })
})

describe('what a card may look like', () => {
  it('takes comments, continuation lines, scales, commas and brackets', () => {
    const deck = deckOf(
      'A divider, and what hangs on it',
      '* R9 in 0 1',
      '  * R8 in 0 1',
      'VIN In 0 ; AC 5',
      '+ DC 0',
      '',
      '* between',
      '+ AC 1 $ 7',
      'r1 IN (OUT) 1kOhm',
      'R2, out, GND, R=3k noisy=0',
      'L1 out a 10mH ic=0',
      'C1 a 0 100n',
      'E1 b 0 VCVS out 0 2',
      '.end',
      'R7 in 0 nonsense',
    )
    expect(deck.elements).toEqual([
      { kind: 'resistor', ref: 'r1', a: 'In', b: 'OUT' },
      { kind: 'resistor', ref: 'R2', a: 'OUT', b: '0' },
      { kind: 'inductor', ref: 'L1', a: 'OUT', b: 'a' },
      { kind: 'capacitor', ref: 'C1', a: 'a', b: '0' },
    ])
    expect(deck.values).toEqual({ r1: 1e3, R2: 3e3, L1: 10e-3, C1: 100e-9 })
    expect(deck.noiseless).toEqual(['R2'])
    expect(deck.controlled).toEqual([{ ref: 'E1', a: 'b', b: '0', plus: 'OUT', minus: '0', gain: 2 }])
    expect(deck.sources).toEqual([{ ref: 'VIN', plus: 'In', minus: '0', dcVolt: 0, acVolt: 1, acPhaseRad: 0 }])
    expect(deckNode(deck, 'oUt')).toBe('OUT')
    expect(deckNode(deck, 'gnd')).toBe('0')
    expect(deckNode(deck, 'c')).toBeUndefined()
    expect(at(deck, 'b').re).toBeCloseTo(1.5, 12)
  })

  it.each([
    ['V1 1 0', 0, 0, 0],
    ['V1 1 0 5', 5, 0, 0],
    ['V1 1 0 DC 5 AC', 5, 1, 0],
    ['V1 1 0 AC 2 90', 0, 2, Math.PI / 2],
    ['V1 1 0 AC 2 SIN(0 1 1k) DC 3', 3, 2, 0],
  ])('reads the source %s', (card, dcVolt, acVolt, acPhaseRad) =>
    expect(deckOf('* t', card, 'R1 1 0 1').sources).toEqual([
      { ref: 'V1', plus: '1', minus: '0', dcVolt, acVolt, acPhaseRad },
    ]),
  )

  it('takes an E of gain 1e9 or more as an ideal op-amp, whichever way it is turned', () => {
    const opamp = (card: string) => deckOf('* t', card).elements
    const upright = { kind: 'opamp', plus: 'p', minus: 'n', out: 'o' }
    expect(opamp('EU1 o 0 p n 1e9')).toEqual([{ ...upright, ref: 'U1' }])
    expect(opamp('E1 o 0 p n 1T')).toEqual([{ ...upright, ref: 'E1' }])
    expect(opamp('E1 o 0 n p -1e9')).toEqual([{ ...upright, ref: 'E1' }])
    expect(opamp('E1 0 o n p 1e9')).toEqual([{ ...upright, ref: 'E1' }])
    expect(opamp('E1 o 0 p n 9.9e8')).toEqual([])
  })
})

describe('subcircuits', () => {
  const nested = [
    '* t',
    '.subckt half a b',
    '.subckt leg a b',
    'R1 a mid 1k',
    'R2 mid b 1k',
    '.ends leg',
    'X1 a m leg',
    'X2 m b LEG',
    'R1 m 0 4k',
    '.ends',
    'V1 in 0 AC 1',
    'XA in out half',
    'RL out 0 2k',
  ]
  it('are put in place of their cards, nodes and parts named after them', () => {
    const deck = deckOf(...nested)
    expect(deck.elements.map(({ ref }) => ref)).toEqual(['XA.X1.R1', 'XA.X1.R2', 'XA.X2.R1', 'XA.X2.R2', 'XA.R1', 'RL'])
    // By hand: 2k from the source, 4k to ground beside 2k + 2k, then halved: (2k/(2k + 2k))·½.
    expect(at(deck, 'out').re).toBeCloseTo(0.25, 12)
    expect(at(deck, 'xa.m').re).toBeCloseTo(0.5, 12)
  })
  it('name an op-amp by the card that holds it', () => {
    const deck = deckOf(
      '.subckt amp p n o',
      'E1 o 0 p n 1e9',
      '.ends',
      'Vin in 0 AC 1',
      'R1 in n 1k',
      'R2 n out 3k',
      'XU1 0 n out amp',
    )
    expect(Object.fromEntries(deck.opamps)).toEqual({ 'xu1.e1': 'XU1.E1', xu1: 'XU1.E1', u1: 'XU1.E1' })
    expect(at(deck, 'out').re).toBeCloseTo(-3, 12)
  })
  it.each([
    [['.subckt a x', 'X1 x a', '.ends', 'X1 1 a'], 'a holds itself.', 2, 6],
    [['.subckt a x', 'X1 x b', '.ends', '.subckt b x', 'X1 x a', '.ends', 'X1 1 a'], 'a holds itself.', 5, 6],
    [['R1 1 0 1', 'X1 1 amp'], 'No subcircuit is called amp.', 2, 6],
    [['.subckt a x y', '.ends', 'X1 1 a'], 'X1 has 1 nodes; a has 2.', 3, 1],
    [['R1 1 0 1', '.subckt a x'], 'This .subckt has no .ends.', 2, 1],
    [['R1 1 0 1', '.ends'], 'This .ends has no .subckt before it.', 2, 1],
  ])('that cannot be resolved are refused: %j', (lines, detail, line, column) =>
    expect(problemsOf(...lines)).toEqual([{ code: 'circuit-not-read', detail, line, column }]),
  )
})

describe('what is refused', () => {
  it.each([
    ['.include secret.lib', '.include is not read; a deck here has cards and .subckt alone.', 1],
    ['.lib a', '.lib is not read; a deck here has cards and .subckt alone.', 1],
    ['.param r=1', '.param is not read; a deck here has cards and .subckt alone.', 1],
    ['Q1 c b e npn', 'Q1 is no card that is read here; R, C, L, V, E and X are.', 1],
    ['R2 in out', 'R2 is written as “R1 in out 10k”.', 1],
    ['R2 in out 4k7', '4k7 is no resistance; R1 in out 10k has one.', 11],
    ['R2 in out -5', 'R2 is -5; it takes a value from zero up.', 11],
    ['R2 in out {r}', 'Expressions in braces or quotes are not read; write the number itself.', 11],
    ['R2 in out 1k tc1=1m', 'The parameter tc1 is not read; noisy=0 is.', 14],
    ['R1 in out 1', 'R1 is there already.', 1],
    ['r1 in out 1', 'r1 is there already.', 1],
    ['E1 o 0 p n 1 2', '2 is left over; the card is written as “E1 out 0 plus minus 1e9”.', 14],
    ['E1 o 0 poly(1) p n 1', 'n is left over; the card is written as “E1 out 0 plus minus 1e9”.', 18],
    ['V2 1 0 DC x', 'DC is followed by a voltage.', 8],
    ['V2 1 0 AC 1 0 7', '7 is left over; the card is written as “Vin in 0 DC 0 AC 1 0”.', 15],
    ['+ 5', 'A line that begins with + continues a card; there is none before it.', 1],
    ['R', 'R needs a name after its letter, such as R1.', 1],
  ])('says what is wrong with %s, and where', (card, detail, column) => {
    const lines = card.startsWith('+') ? ['* t', card, 'R1 in 0 1k'] : ['* t', 'R1 in 0 1k', card]
    const line = lines.indexOf(card) + 1
    expect(problemsOf(...lines)).toEqual([{ code: 'circuit-not-read', detail, line, column }])
  })
  it('says all problems at once, and a script of commands once', () => {
    const found = problemsOf('* t', '.control', 'shell rm x', 'R1 a b', '.endc', 'R2 in out', 'Q1 a b c d')
    expect(found.map(({ line }) => line)).toEqual([2, 6, 7])
  })
  it('refuses a deck without cards, and one beyond its size', () => {
    expect(problemsOf('')[0]!.detail).toBe('The deck has no cards.')
    expect(problemsOf('a title and no more')[0]!.detail).toBe('The deck has no cards.')
    expect(problemsOf('x'.repeat(DECK_CHARS_MAX + 1))[0]!.detail).toContain('at most 200000 characters')
    const long = problemsOf('* t', ...Array.from({ length: 5001 }, (_, k) => `R${k} a 0 1`))
    expect(long).toEqual([
      { code: 'circuit-not-read', detail: 'A deck has at most 20000 words.', line: 5002, column: 1 },
    ])
    const bomb = Array.from({ length: 18 }, (_, k) => [
      `.subckt s${k} a`,
      ...`XA XB XC XD`.split(' ').map((x) => `${x} a s${k + 1}`),
      '.ends',
    ])
    const lines = ['* t', ...bomb.flat(), '.subckt s18 a', 'R1 a 0 1', '.ends', 'X1 1 s0']
    expect(problemsOf(...lines)[0]!.detail).toBe(
      `A deck has at most ${DECK_CARDS_MAX} cards with all subcircuits put in.`,
    )
    const deep = Array.from({ length: 30 }, (_, k) => [`.subckt s${k} a`, `X1 a s${k + 1}`, '.ends']).flat()
    expect(problemsOf('* t', ...deep, '.subckt s30 a', 'R1 a 0 1', '.ends', 'X1 1 s0')[0]!.detail).toContain('20 deep')
  })
  it('keeps names such as __proto__ to themselves', () => {
    const deck = deckOf('* t', 'V1 __proto__ 0 AC 1', 'Rconstructor __proto__ toString 1k', 'C__proto__ toString 0 1n')
    expect(Object.keys(deck.values)).toEqual(['Rconstructor', 'C__proto__'])
    expect(at(deck, 'tostring').re).toBe(1)
    expect(deckNode(deck, 'valueOf')).toBeUndefined()
  })
  it.each([
    'R1 a b 1\n',
    '+ a',
    '(',
    ';',
    '$',
    '.subckt s a\n',
    '.ends\n',
    'X1 a s\n',
    'V1 a 0 AC 1 SIN(',
    '* ',
    '\n',
    '=',
    '1',
    '\r',
    'é',
  ])('reads %j repeated in time that grows with length alone', (piece) => {
    const timeOf = (length: number) => {
      const text = `* t\nR1 a 0 1\n${piece.repeat(Math.ceil(length / piece.length))}`
      let best = Infinity
      for (let k = 0; k < 5; k++) {
        const start = performance.now()
        readDeck(text)
        best = Math.min(best, performance.now() - start)
      }
      return best
    }
    timeOf(1e4)
    // Below a millisecond the clock and the collector decide, not the reader.
    expect(timeOf(1e5) / Math.max(timeOf(1e4), 1)).toBeLessThan(15)
  })
})

describe('sources', () => {
  const adder = ['* t', 'V1 a 0 AC 1', 'V2 b 0 AC 2 90', 'R1 a out 1k', 'R2 b out 1k']
  it('add up with their magnitudes and phases', () => {
    const { re, im } = at(deckOf(...adder), 'out', 1e3)
    expect([re, im]).toAgreeWith([0.5, 1], { absolute: 1e-12 })
  })
  it('of one phase give one H(s), in balance or not', () => {
    const deck = deckOf(
      '* t',
      'V1 a 0 AC 0.5',
      'V2 b 0 AC 0.5 180',
      'V3 c 0 5',
      'R1 a out 1k',
      'C1 out b 1n',
      'R3 out c 1g',
    )
    const prepared = prepareCircuit(netlistOfDeck(deck, { output: ['out', 'b'] }))
    const { poles } = rationalTransferFunction(prepared, deck.values)
    // By hand: a difference of 1 V over R1 and C1; 1 GΩ beside 1 kΩ moves the pole by 1e-6.
    expect(poles.map(({ re }) => re)).toAgreeWith([-1e6], { relative: 2e-6 })
    const direct = deckResponse(deck, { output: ['out', 'b'] }, [1e5, 1e6])
    const whole = response(prepared, deck.values, [1e5, 1e6])
    expect(whole.re).toAgreeWith(direct.re, { relative: 1e-12 })
    expect(whole.im).toAgreeWith(direct.im, { relative: 1e-12 })
  })
  it('may float, and be of any size', () => {
    const deck = deckOf('* t', 'V1 a b AC 3', 'R1 a 0 1k', 'R2 b 0 2k', 'V2 b c 7', 'R3 c 0 1meg')
    // By hand: 3 V over 1k + 2k beside 1M.
    const low = 1 / (1 / 2e3 + 1e-6)
    expect(at(deck, 'a').re).toBeCloseTo(3e3 / (1e3 + low), 12)
    expect(at(deck, 'c').re).toBeCloseTo((-3 * low) / (1e3 + low), 12)
    expect(at(deck, ['a', 'b']).re).toBeCloseTo(3, 12)
  })
  it('give way to a node that is named as the input', () => {
    const deck = deckOf(...adder)
    const { re } = deckResponse(deck, { input: 'A', output: 'out' }, [0])
    expect(re[0]).toBeCloseTo(0.5, 12)
  })
  it('that differ in phase have no H(s) together; nor has a deck with none, or an unknown node', () => {
    expect(() => netlistOfDeck(deckOf(...adder), { output: 'out' })).toThrow('V2 has a phase of its own')
    const still = deckOf('* t', 'V1 a 0 5', 'R1 a 0 1')
    expect(() => netlistOfDeck(still, { output: 'a' })).toThrow('No source has an AC part')
    expect(() => netlistOfDeck(still, { output: 'z' })).toThrow('No node is called z; the deck has a.')
    expect(() => deckResponse(still, { output: 'z' }, [1])).toThrow(ProblemError)
  })
})

describe('controlled sources', () => {
  it('follow a difference between any two nodes, into any two nodes', () => {
    const deck = deckOf('* t', 'V1 a 0 AC 1', 'R1 a b 1k', 'R2 b 0 1k', 'E1 x y a b -4', 'R3 x 0 1k', 'R4 y 0 3k')
    // By hand: v(a) − v(b) = ½; −2 V parted 1 : 3 by one current.
    expect(at(deck, ['x', 'y']).re).toBeCloseTo(-2, 12)
    expect(at(deck, 'x').re).toBeCloseTo(-0.5, 12)
    expect(at(deck, 'y').re).toBeCloseTo(1.5, 12)
  })
  it('may follow their own node: a gain of −1 about itself halves', () => {
    const deck = deckOf('* t', 'V1 a 0 AC 1', 'E1 out 0 a out 1', 'R1 out 0 1')
    expect(at(deck, 'out').re).toBeCloseTo(0.5, 12)
  })
  it('that hold nothing are named', () => {
    const deck = deckOf('* t', 'V1 a 0 AC 1', 'E1 b 0 b 0 1', 'R1 a b 1')
    expect(() => at(deck, 'b')).toThrow(/E1|b/)
    const shorted = deckOf('* t', 'V1 a 0 AC 1', 'E1 a 0 a 0 2', 'R1 a 0 1')
    expect(() => at(shorted, 'a', 1)).toThrow(ProblemError)
  })
})
