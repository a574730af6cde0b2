import { describe, expect, it } from 'vitest'
import type { CircuitConditions } from '#shared/analysis/nodal-analysis'
import { prepareCircuit } from '#shared/analysis/nodal-analysis'
import { integratedNoise, signalToNoiseDb } from '#shared/noise/integrated-noise'
import { outputNoise } from '#shared/noise/output-noise'
import { ProblemError } from '#shared/problems'
import { netlistOf, valuesOf } from '../../support/circuits'

const prepared = (cards: string[], conditions: CircuitConditions = {}) => prepareCircuit(netlistOf(cards), conditions)

// Source: √(4kTR) by hand with k of the SI brochure, 9th edition.
const thermal = (ohm: number, kelvin = 300.15) => Math.sqrt(4 * 1.380649e-23 * kelvin * ohm)

// Source: equipartition: the noise voltage across a capacitor is √(kT/C) whatever the resistors are (H. Nyquist 1928).
const equipartition = (farad: number, kelvin = 300.15) => Math.sqrt((1.380649e-23 * kelvin) / farad)

describe('the whole noise across a capacitor is √(kT/C)', () => {
  it.each([1, 1e3, 1e6, 1e9])('for R = %d Ω', (ohm) => {
    const cards = [`R1 in out ${ohm}`, 'C1 out 0 1e-9']
    const cornerHz = 1 / (2 * Math.PI * ohm * 1e-9)
    const { integratedVolt } = integratedNoise(prepared(cards), valuesOf(cards), [cornerHz / 1e9, cornerHz * 1e9])
    expect(integratedVolt).toAgreeWith(equipartition(1e-9), { relative: 1e-8 })
  })
  it.each([0.1, 10, 1e3, 1e6])('in a resonance of Q = %d', (q) => {
    const ohm = 1000 / q
    const cards = [`R1 in a ${ohm}`, 'L1 a out 1e-3', 'C1 out 0 1e-9']
    const { integratedVolt } = integratedNoise(prepared(cards), valuesOf(cards), [1e-4, 1e14])
    expect(integratedVolt).toAgreeWith(equipartition(1e-9), { relative: 1e-6 })
  })
  it('with source and load resistance, at their temperature', () => {
    const cards = ['R1 in out 1000', 'C1 out 0 1e-9']
    const got = integratedNoise(prepared(cards, { sourceOhm: 500, loadOhm: 3000 }), valuesOf(cards), [1e-3, 1e15], {
      tempKelvin: 400,
    })
    expect(got.integratedVolt).toAgreeWith(equipartition(1e-9, 400), { relative: 1e-6 })
    expect(Object.keys(got.integratedByContributor).sort()).toEqual(['R1', 'load R', 'source R'])
    const squares = Object.values(got.integratedByContributor).map((x) => x * x)
    expect(Math.sqrt(squares.reduce((a, b) => a + b))).toAgreeWith(got.integratedVolt, { relative: 1e-12 })
  })
})

describe('a follower', () => {
  const cards = ['R1 in p 10000', 'EU1 out 0 p out 1e9']
  const record = {
    noiseVoltPerRtHz: 5e-9,
    noiseAmpPerRtHz: 1e-12,
    noiseVoltCornerHz: 100,
    noiseAmpCornerHz: 1000,
  }
  const follower = prepared(cards, { amplifiers: { U1: record } })

  it('adds R, e_n and i_n·R, with their 1/f corners', () => {
    const frequencies = [1, 100, 1e4, 1e6]
    const { byContributor, densityVoltPerRtHz } = outputNoise(follower, valuesOf(cards), frequencies)
    const wanted: Record<string, number[]> = {
      R1: frequencies.map(() => thermal(10e3)),
      'U1.e_n': frequencies.map((f) => 5e-9 * Math.sqrt(1 + 100 / f)),
      'U1.i_n(+)': frequencies.map((f) => 1e-8 * Math.sqrt(1 + 1000 / f)),
      // Into the output, which an ideal op-amp holds.
      'U1.i_n(-)': frequencies.map(() => 0),
    }
    expect(Object.keys(byContributor)).toEqual(Object.keys(wanted))
    for (const [name, density] of Object.entries(wanted))
      expect(byContributor[name], name).toAgreeWith(density, { relative: 1e-12, absolute: 1e-30 })
    const whole = frequencies.map((_, k) => Math.hypot(...Object.values(wanted).map((density) => density[k]!)))
    expect(densityVoltPerRtHz).toAgreeWith(whole, { relative: 1e-12 })
  })
  it('integrates 1/f noise to n²·(f₂ − f₁ + f_c·ln(f₂/f₁))', () => {
    const { integratedByContributor } = integratedNoise(follower, valuesOf(cards), [0.1, 1e4])
    const wanted = 5e-9 * Math.sqrt(1e4 - 0.1 + 100 * Math.log(1e5))
    expect(integratedByContributor['U1.e_n']).toAgreeWith(wanted, { relative: 1e-9 })
  })
  it('has at 0 Hz white noise as it is, and 1/f noise without end', () => {
    expect(outputNoise(follower, valuesOf(cards), [0]).densityVoltPerRtHz[0]).toBe(Infinity)
    const white = prepared(cards, { amplifiers: { U1: { noiseVoltPerRtHz: 5e-9 } } })
    const { byContributor } = outputNoise(white, valuesOf(cards), [0])
    expect(Object.keys(byContributor)).toEqual(['R1', 'U1.e_n'])
    expect(byContributor['U1.e_n']).toAgreeWith([5e-9], { relative: 1e-14 })
  })
  it('makes no op-amp noise without a record', () => {
    expect(Object.keys(outputNoise(prepared(cards), valuesOf(cards), [1e3]).byContributor)).toEqual(['R1'])
  })
})

describe('the inverting amplifier of gain −10', () => {
  const cards = ['R1 in n 1000', 'R2 n out 10000', 'EU1 out 0 0 n 1e9']
  const amplifiers = { U1: { noiseVoltPerRtHz: 4e-9, noiseAmpPerRtHz: 2e-12 } }
  const { byContributor, densityVoltPerRtHz, inputReferredVoltPerRtHz } = outputNoise(
    prepared(cards, { amplifiers }),
    valuesOf(cards),
    [1e3],
  )
  it('amplifies e_n by 11, R1 by 10; R2 and i_n·R2 as they are; none for the grounded input', () => {
    expect(Object.keys(byContributor)).toEqual(['R1', 'R2', 'U1.e_n', 'U1.i_n(-)'])
    expect(byContributor.R1).toAgreeWith([10 * thermal(1e3)], { relative: 1e-12 })
    expect(byContributor.R2).toAgreeWith([thermal(10e3)], { relative: 1e-12 })
    expect(byContributor['U1.e_n']).toAgreeWith([44e-9], { relative: 1e-12 })
    expect(byContributor['U1.i_n(-)']).toAgreeWith([2e-8], { relative: 1e-12 })
  })
  it('is referred to the input by |H| = 10', () => {
    expect(inputReferredVoltPerRtHz[0]).toAgreeWith(densityVoltPerRtHz[0]! / 10, { relative: 1e-12 })
  })
})

describe('special cases', () => {
  it('hears nothing of a resistor of 0 Ω, of one without end, or of one across the source', () => {
    const cards = ['R1 in out 1000', 'R2 out 0 1000', 'R3 out a 0', 'R4 a 0 1000', 'R5 in 0 50', 'R6 out 0 Infinity']
    const { byContributor } = outputNoise(prepared(cards), valuesOf(cards), [1e3])
    expect(byContributor.R3![0]).toBe(0)
    expect(byContributor.R5![0]).toAgreeWith(0, { absolute: 1e-25 })
    expect(byContributor.R6![0]).toBe(0)
    expect(byContributor.R1![0]).toAgreeWith(thermal(1000) / 3, { relative: 1e-12 })
  })
  it('refers to an input that does not reach the output without end', () => {
    const cards = ['R1 in 0 1000', 'R2 out 0 1000']
    const got = outputNoise(prepared(cards), valuesOf(cards), [1e3])
    expect(got.inputReferredVoltPerRtHz[0]).toBe(Infinity)
    expect(got.densityVoltPerRtHz).toAgreeWith([thermal(1000)], { relative: 1e-12 })
  })
  it('takes both halves of a source between two nodes', () => {
    const netlist = netlistOf(['R1 a b 1000'], {
      inputs: [{ name: 'in', plus: 'a', minus: 'b' }],
      outputs: [{ name: 'out', plus: 'a', minus: 'b' }],
    })
    const { byContributor } = outputNoise(prepareCircuit(netlist, { sourceOhm: 1000 }), { R1: 1000 }, [1e3])
    expect(byContributor['source R']).toAgreeWith([thermal(1000) / 2], { relative: 1e-12 })
    expect(byContributor.R1).toAgreeWith([thermal(1000) / 2], { relative: 1e-12 })
  })
  it.each([
    [[0, 1e3], 'value-not-positive'],
    [[1e3, 1e3], 'value-out-of-range'],
    [[1, Infinity], 'value-not-positive'],
  ] as const)('refuses the band %j', (band, code) => {
    const cards = ['R1 in out 1000', 'C1 out 0 1e-9']
    const attempt = () => integratedNoise(prepared(cards), valuesOf(cards), band)
    expect(attempt).toThrow(expect.objectContaining({ name: ProblemError.name, code }))
  })
  it('gives 80 dB for 1 V over 100 µV', () => {
    expect(signalToNoiseDb(1, 1e-4)).toAgreeWith(80, { relative: 1e-14 })
    expect(signalToNoiseDb(1, 0)).toBe(Infinity)
  })
})
