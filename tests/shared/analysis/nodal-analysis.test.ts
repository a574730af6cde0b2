import { describe, expect, it } from 'vitest'
import { inputImpedance, outputImpedance, prepareCircuit, response, responseAt } from '#shared/analysis/nodal-analysis'
import type { CircuitConditions } from '#shared/analysis/nodal-analysis'
import { ProblemError } from '#shared/problems'
import type { NetPort } from '#shared/circuit/netlist/netlist'
import { netlistOf, netlistOfCheck, readCheck, valuesOf } from '../../support/circuits'

// Wanted figures are closed forms of circuit theory (divider, RC, inverting and difference amplifier), written out.

const caught = (run: () => unknown): ProblemError => {
  try {
    run()
  } catch (error) {
    if (error instanceof ProblemError) return error
    throw error
  }
  throw new Error('nothing was raised')
}

const at = (cards: string[], frequenciesHz: number[], conditions: CircuitConditions = {}, inputs?: NetPort[]) =>
  response(prepareCircuit(netlistOf(cards, inputs ? { inputs } : {}), conditions), valuesOf(cards), frequenciesHz)

/** 1/(1 + j2πf·τ)·k */
const firstOrder = (k: number, tauSec: number, f: number) => {
  const x = 2 * Math.PI * f * tauSec
  return { re: k / (1 + x * x), im: (-k * x) / (1 + x * x) }
}

const INVERTING = ['Ri in n 10000', 'Rf n out 100000', 'Cf n out 1.5e-9', 'EU1 out 0 0 n']

describe('source and load', () => {
  it('adds the source resistance to Ri of an inverting low-pass', () => {
    const frequencies = [0, 10, 1061, 1e5]
    const got = at(INVERTING, frequencies, { sourceOhm: 600 })
    frequencies.forEach((f, k) => {
      const wanted = firstOrder(-100e3 / 10.6e3, 100e3 * 1.5e-9, f)
      expect(got.re[k]).toAgreeWith(wanted.re, { relative: 1e-12 })
      expect(got.im[k]).toAgreeWith(wanted.im, { relative: 1e-12 })
    })
  })

  it('does not move an output that an op-amp holds', () => {
    const loaded = at(INVERTING, [0, 1e3], { loadOhm: 100, loadFarad: 1e-7 })
    expect(loaded.re).toAgreeWith(at(INVERTING, [0, 1e3]).re, { relative: 1e-12 })
  })

  it('puts load R and C across a passive output', () => {
    const cards = ['R1 in out 1000']
    const [f] = [2e3]
    // 1 kΩ against 3 kΩ ∥ 10 nF: gain ¾, time constant 750 Ω · 10 nF.
    const wanted = firstOrder(0.75, 750 * 1e-8, f!)
    const got = at(cards, [f!, 0], { loadOhm: 3000, loadFarad: 1e-8 })
    expect(got.re).toAgreeWith([wanted.re, 0.75], { relative: 1e-13 })
    expect(got.im[0]).toAgreeWith(wanted.im, { relative: 1e-13 })
  })

  it.each([0, undefined, Infinity])('takes a load of %s ohm for none', (loadOhm) => {
    expect(at(['R1 in out 1000', 'R2 out 0 1000'], [10], { loadOhm }).re[0]).toAgreeWith(0.5, { relative: 1e-14 })
  })
})

describe('ports', () => {
  const DIFFERENCE = ['R1 im n 10000', 'R2 n out 47000', 'R3 ip p 10000', 'R4 p 0 47000', 'EU1 out 0 p n']
  const pair = [{ name: 'in', plus: 'ip', minus: 'im' }]

  it('drives a pair in balance: a difference amplifier gives R2/R1', () => {
    expect(at(DIFFERENCE, [0, 1e3], {}, pair).re).toAgreeWith([4.7, 4.7], { relative: 1e-13 })
  })

  it('splits the source resistance between the leads of a pair', () => {
    // Both 10 kΩ arms grow by 150 Ω.
    expect(at(DIFFERENCE, [1e3], { sourceOhm: 300 }, pair).re[0]).toAgreeWith(47 / 10.15, { relative: 1e-13 })
  })

  it('sees 2·R1 between the inputs of a difference amplifier', () => {
    const prepared = prepareCircuit(netlistOf(DIFFERENCE, { inputs: pair }))
    // The n side carries (v− − v_p)/R1 with v_p = ½·47/57, the p side ½/57 kΩ: their mean is 1 V/20 kΩ.
    expect(inputImpedance(prepared, valuesOf(DIFFERENCE), [0, 50]).re).toAgreeWith([20e3, 20e3], { relative: 1e-12 })
  })

  it('drives the input that is named and holds the others at 0 V', () => {
    const cards = ['R1 a n 1000', 'R2 b n 2000', 'R3 n out 4000', 'EU1 out 0 0 n']
    const inputs = ['a', 'b'].map((name) => ({ name, plus: name, minus: '0' }))
    expect(at(cards, [1], {}, inputs).re[0]).toAgreeWith(-4, { relative: 1e-13 })
    expect(at(cards, [1], { input: 'b' }, inputs).re[0]).toAgreeWith(-2, { relative: 1e-13 })
  })

  it('reads each output by its name, a pair as the difference', () => {
    const cards = ['R1 in a 1000', 'R2 a b 1000', 'R3 b 0 2000']
    const outputs = [
      { name: 'ab', plus: 'a', minus: 'b' },
      { name: 'b', plus: 'b', minus: '0' },
    ]
    const prepared = prepareCircuit(netlistOf(cards, { outputs }))
    expect(response(prepared, valuesOf(cards), [5]).re[0]).toAgreeWith(0.25, { relative: 1e-14 })
    expect(response(prepared, valuesOf(cards), [5], 'b').re[0]).toAgreeWith(0.5, { relative: 1e-14 })
    expect(caught(() => response(prepared, valuesOf(cards), [5], 'c')).code).toBe('output-unknown')
  })

  it('holds signal grounds at ground', () => {
    const cards = ['R1 in out 1000', 'R2 out Vref 1000']
    const prepared = prepareCircuit(netlistOf(cards, { signalGrounds: ['Vref'] }))
    expect(response(prepared, valuesOf(cards), [0]).re[0]).toAgreeWith(0.5, { relative: 1e-14 })
  })
})

describe('impedances', () => {
  it('sees R1 ∥ R2 at the output of a divider, source resistance included', () => {
    const cards = ['R1 in out 1000', 'R2 out 0 3000']
    const prepared = prepareCircuit(netlistOf(cards), { sourceOhm: 2000 })
    expect(outputImpedance(prepared, valuesOf(cards), [0, 1e6]).re).toAgreeWith([1500, 1500], { relative: 1e-13 })
    expect(inputImpedance(prepared, valuesOf(cards), [0]).re[0]).toAgreeWith(4000, { relative: 1e-13 })
  })

  it('is zero at the output of an op-amp and infinite where no current flows', () => {
    const prepared = prepareCircuit(netlistOf(['R1 in p 1000', 'EU1 out 0 p out']))
    expect(outputImpedance(prepared, { R1: 1000 }, [1e3]).re[0]).toBe(0)
    expect(inputImpedance(prepared, { R1: 1000 }, [1e3]).re[0]).toBe(Infinity)
  })
})

describe('0 Hz, zero ohm, wide ratios', () => {
  it('opens capacitors and shorts inductors at 0 Hz, loops of inductors included', () => {
    const cards = ['L1 in a 1e-3', 'L2 in a 2e-3', 'R1 a out 1000', 'C1 out 0 1e-6', 'R2 out 0 1000']
    expect(at(cards, [0]).re[0]).toAgreeWith(0.5, { relative: 1e-15 })
  })

  it('takes 0 Ω as a wire, two in parallel too', () => {
    const cards = ['R1 in a 0', 'R2 in a 0', 'R3 a out 1000', 'R4 out x 1000', 'R5 x 0 0']
    expect(at(cards, [0, 1e6]).re).toAgreeWith([0.5, 0.5], { relative: 1e-15 })
  })

  it('loses no digits between two resistors of 1 TΩ tied by 1 Ω', () => {
    const cards = ['R1 in a 1e12', 'R2 a out 1', 'R3 out 0 1e12']
    expect(at(cards, [0, 1e3]).re).toAgreeWith([1e12 / (2e12 + 1), 1e12 / (2e12 + 1)], { relative: 1e-14 })
  })

  it.each([1e-3, 1, 1e3, 1e6, 1e9])('loses no digits between two capacitors of 1 pF tied by 1 Ω, at %d Hz', (f) => {
    const cards = ['C1 in a 1e-12', 'R2 a out 1', 'C3 out 0 1e-12']
    // 1/(sC) over 2/(sC) + R = 1/(2 + sRC)
    const x = 2 * Math.PI * f * 1e-12
    const got = at(cards, [f])
    expect(got.re[0]).toAgreeWith(2 / (4 + x * x), { relative: 1e-13 })
    expect(got.im[0]).toAgreeWith(-x / (4 + x * x), { relative: 1e-11 })
  })

  it.each([
    [1, 1e-12],
    [1e12, 1],
    [1e-3, 1e-3],
    [1e9, 1e-15],
  ])('gives an RC low-pass of %d Ω and %d F from 1 mHz to 1 GHz', (ohm, farad) => {
    const frequencies = Array.from({ length: 13 }, (_, k) => 10 ** (k - 3))
    const got = at([`R1 in out ${ohm}`, `C1 out 0 ${farad}`], frequencies)
    const wanted = frequencies.map((f) => firstOrder(1, ohm * farad, f))
    expect(got.re).toAgreeWith(
      wanted.map(({ re }) => re),
      { relative: 1e-12 },
    )
    expect(got.im).toAgreeWith(
      wanted.map(({ im }) => im),
      { relative: 1e-12 },
    )
  })

  it('evaluates at any complex s', () => {
    const prepared = prepareCircuit(netlistOf(['R1 in out 1000', 'C1 out 0 1e-6']))
    const { re, im } = responseAt(prepared, { R1: 1000, C1: 1e-6 }, { re: 1000, im: 0 })
    expect([re, im]).toAgreeWith([0.5, 0], { relative: 1e-14 })
  })
})

describe('circuits that cannot be computed', () => {
  it('names every part without value', () => {
    const check = readCheck('lp2-mfb')
    const { R2: _r, C1: _c, ...values } = check.parts
    const { code, problems } = caught(() => response(prepareCircuit(netlistOfCheck('lp2-mfb')), values, [1]))
    expect(code).toBe('part-missing')
    expect(problems.map(({ pointer }) => pointer)).toEqual(['#/values/R2', '#/values/C1'])
    expect(problems[0].detail).toBe('R2 has no value.')
  })

  it.each([NaN, -1, Infinity])('refuses %d farad', (C1) => {
    const prepared = prepareCircuit(netlistOf(['R1 in out 1', 'C1 out 0 1']))
    const { code, problems } = caught(() => response(prepared, { R1: 1, C1 }, [1]))
    expect([code, problems[0].pointer]).toEqual(['value-out-of-range', '#/values/C1'])
  })

  it.each([
    [
      'a node between capacitors at 0 Hz',
      ['C1 in a 1e-9', 'C2 a out 1e-9', 'R1 out 0 1000'],
      0,
      'Node a floats: nothing but capacitors connect it at 0 Hz.',
    ],
    [
      'an integrator at 0 Hz',
      ['R1 in n 1000', 'C1 n out 1e-9', 'EU1 out 0 0 n'],
      0,
      'No feedback holds the output of U1 at 0 Hz: its voltage has no unique value.',
    ],
    [
      'an op-amp without feedback',
      ['R1 in n 1000', 'R2 n 0 1000', 'EU1 out 0 0 n'],
      1e3,
      'No feedback holds the output of U1: its voltage has no unique value.',
    ],
    ['a loose output', ['R1 in 0 1000', 'R2 out x 1000'], 1e3, 'Node out floats: nothing holds its voltage.'],
    [
      'an input on ground',
      ['R1 in 0 0', 'R2 in out 1000', 'R3 out 0 1000'],
      1e3,
      'Port in is shorted: a source cannot drive it.',
    ],
    [
      'an input on ground through an inductor, at 0 Hz',
      ['L1 in 0 1e-3', 'R2 in out 1000', 'R3 out 0 1000'],
      0,
      'Port in is shorted at 0 Hz: a source cannot drive it.',
    ],
    [
      'two op-amps on one node',
      ['R1 in p 1000', 'R2 p 0 1000', 'EU1 out 0 p out', 'EU2 out 0 p out'],
      1e3,
      'The output of U1 drives a node that is held already.',
    ],
  ])('says what is wrong with %s', (_, cards, frequencyHz, sentence) => {
    const { code, detail } = caught(() => at(cards, [frequencyHz]))
    expect([code, detail]).toEqual(['circuit-singular', sentence])
  })

  it('still gives the response above 0 Hz where only 0 Hz is singular', () => {
    const got = at(['R1 in n 10000', 'C1 n out 1e-8', 'EU1 out 0 0 n'], [1e3])
    // −1/(sRC): +j/(2π·1 kHz·100 µs)
    expect(got.im[0]).toAgreeWith(1 / (2 * Math.PI * 1e3 * 1e-4), { relative: 1e-14 })
  })

  it('says that there is no port', () => {
    expect(caught(() => prepareCircuit(netlistOf(['R1 in out 1'], { outputs: [] }))).detail).toBe(
      'The circuit has no output port.',
    )
  })
})
