import { describe, expect, it } from 'vitest'
import type { Reading } from '#shared/problems'
import { readGain, readPercent, readQuantity, readTemperature } from '#shared/quantities/read'
import type { Unit } from '#shared/quantities/unit'
import { UNIT_WORDS, UNITS } from '#shared/quantities/unit'

const problem = (reading: Reading<unknown>) => (reading.ok ? null : reading.problems[0])
const value = <T>(reading: Reading<T>) => (reading.ok ? reading.value : reading.problems[0].detail)

describe('readQuantity', () => {
  // Source: SI brochure, 9th edition (prefixes, units); V/µs for slew rates, nV/√Hz for noise and 3V3: common practice.
  it.each<[string, Unit, number]>([
    ['10 mH', 'H', 0.01],
    ['2H2', 'H', 2.2],
    ['15 µs', 's', 1.5e-5],
    ['3.3 V', 'V', 3.3],
    ['3V3', 'V', 3.3],
    ['100 mV', 'V', 0.1],
    ['2 mA', 'A', 0.002],
    ['5 V/µs', 'V/s', 5e6],
    ['5 V/us', 'V/s', 5e6],
    ['0.5V/μs', 'V/s', 5e5],
    ['5 MV/s', 'V/s', 5e6],
    ['8 nV/√Hz', 'V/√Hz', 8e-9],
    ['8nV/rtHz', 'V/√Hz', 8e-9],
    ['2 pA/√Hz', 'A/√Hz', 2e-12],
    ['15 krad/s', 'rad/s', 15e3],
    ['300 K', 'K', 300],
    ['0.707', '', 0.707],
    ['10k', '', 1e4],
    ['5 %', '%', 5],
    ['6 dB', 'dB', 6],
    ['45°', '°', 45],
    ['125 mW', 'W', 0.125],
  ])('reads %s as %s', (text, unit, wanted) => {
    expect(value(readQuantity(text, unit))).toBe(wanted)
  })

  it('reads the example that the sentence of each unit offers', () => {
    for (const unit of UNITS) {
      const { example } = UNIT_WORDS[unit]
      expect((unit === 'K' ? readTemperature(example) : readQuantity(example, unit)).ok, `${example} as ${unit}`).toBe(
        true,
      )
    }
  })

  it('says what was understood and what the field takes', () => {
    expect(problem(readQuantity('4k7', 'F', { name: 'Cf' }))).toEqual({
      code: 'unit-wrong',
      detail: '4k7 is a resistance; Cf takes a capacitance, such as 4n7.',
    })
    expect(problem(readQuantity('10 kHz', 'Ω'))).toEqual({
      code: 'unit-wrong',
      detail: '10 kHz is a frequency; a resistance is wanted, such as 4k7.',
    })
    expect(problem(readQuantity('ten', 'Ω', { name: 'Rf' }))).toEqual({
      code: 'value-not-read',
      detail: '“ten” could not be read; Rf takes a resistance, such as 4k7.',
    })
    expect(problem(readQuantity(' ', 'Hz', { name: 'f_c' }))?.detail).toBe(
      'Nothing is typed; f_c takes a frequency, such as 2.4 kHz.',
    )
  })

  it('keeps sign and zero to the fields that allow them', () => {
    expect(problem(readQuantity('-15', 'V'))?.code).toBe('value-not-positive')
    expect(value(readQuantity('−15 V', 'V', { allowNegative: true }))).toBe(-15)
    expect(value(readQuantity('0', 'Ω'))).toBe(0)
    expect(problem(readQuantity('0', 'F'))?.code).toBe('value-not-positive')
    expect(problem(readQuantity('0n', 'H'))?.code).toBe('value-not-positive')
    expect(value(readQuantity('0', 'F', { allowZero: true }))).toBe(0)
    expect(value(readQuantity('-0', 'Ω', { allowNegative: true }))).toBe(0)
  })

  it('refuses 1,000 with both readings', () => {
    expect(problem(readQuantity('1,000', 'Ω'))).toEqual({
      code: 'value-not-read',
      detail: '“1,000” can be read as 1.000 or as 1000. Write one of these.',
    })
    expect(problem(readQuantity('10,000 k', 'Ω'))?.detail).toContain('as 10.000 k or as 10000 k.')
  })

  it('reads a comma that can only be a decimal mark', () => {
    expect(value(readQuantity('1,5k', 'Ω'))).toBe(1500)
    expect(value(readQuantity('0,470', 'Ω'))).toBe(0.47)
    expect(value(readQuantity('1,0005', 'Ω'))).toBe(1.0005)
    expect(value(readQuantity('4,7 kΩ', 'Ω'))).toBe(4700)
    expect(value(readQuantity('1,000', 'Ω', { decimalComma: true }))).toBe(1)
    expect(value(readQuantity('2,205e3', 'Hz', { decimalComma: true }))).toBe(2205)
  })

  it.each([
    ['1,234.5', '1234.5'],
    ['1.234,5', '1234.5'],
    ['1,234,567', '1234567'],
    ['1.234.567,8 k', '1234567.8 k'],
  ])('refuses the grouped digits of %s and offers %s', (text, instead) => {
    for (const decimalComma of [true, false])
      expect(problem(readQuantity(text, 'Ω', { decimalComma }))?.detail).toContain(`such as ${instead}.`)
    expect(readQuantity(instead, 'Ω').ok).toBe(true)
  })

  it('offers nothing where no reading is likely', () => {
    expect(problem(readQuantity('1,2,3', 'Ω'))?.detail).toBe(
      '“1,2,3” has several decimal marks. Write digits without grouping.',
    )
  })
})

describe('readGain', () => {
  it('reads a ratio with its sign, typed with a hyphen or a minus', () => {
    expect(value(readGain('-2'))).toEqual({ gain: -2, decibel: false })
    expect(value(readGain('−2'))).toEqual({ gain: -2, decibel: false })
    expect(value(readGain('+10k'))).toEqual({ gain: 1e4, decibel: false })
  })

  // Source: definition of the decibel for field quantities, 20·log10 (IEC 60027-3).
  it.each([
    ['20 dB', 10],
    ['−20dB', 0.1],
    ['0 dB', 1],
    ['6 dB', 1.9952623149688795],
    ['6 db', 1.9952623149688795],
  ])('reads %s as a ratio of %d without a sign', (text, gain) => {
    const reading = readGain(text)
    expect(reading.ok && reading.value.decibel).toBe(true)
    expect(reading.ok && reading.value.gain).toAgreeWith(gain, { relative: 1e-15 })
  })

  it.each(['2x', 'dB', '6 dB dB', '', 'two', '1e999', '1e9 dB', '-1e9 dB', '−', '6 dB '.padEnd(150, 'x')])(
    'refuses %j with a sentence',
    (text) => expect(problem(readGain(text))?.detail).toMatch(/\.$/),
  )

  it('says what was understood', () => {
    expect(problem(readGain('10 kHz', { name: 'K' }))?.detail).toBe(
      '10 kHz is a frequency; K takes a gain: a ratio such as −2, or a level such as 6 dB.',
    )
    expect(problem(readGain('1,000'))?.detail).toContain('as 1.000 or as 1000')
    expect(problem(readGain(`6${' '.repeat(97)}dB and more`))?.detail).toContain('characters long')
  })
})

describe('readPercent', () => {
  it.each([
    ['1 %', 0.01],
    ['1', 0.01],
    ['0.1%', 0.001],
    ['± 5 %', 0.05],
    ['0.0000001 %', 1e-9],
    ['25 ppm', 25e-6],
    ['25ppm', 25e-6],
    ['0', 0],
  ])('reads %s as the fraction %d', (text, wanted) => expect(value(readPercent(text))).toBe(wanted))

  it('reads a decimal comma where the person writes one', () => {
    expect(value(readPercent('0,125 %', { decimalComma: true }))).toBe(0.00125)
  })

  it.each(['', '%', '5k %', '5 % ppm', '5 ppm ppm', '-1 %', '1 Hz', `${'0'.repeat(99)}1 x`])('refuses %j', (text) =>
    expect(problem(readPercent(text))?.detail).toMatch(/\.$/),
  )
})

describe('readTemperature', () => {
  // Source: SI brochure, 9th edition: t/°C = T/K − 273.15.
  it.each([
    ['25 °C', 298.15],
    ['25', 298.15],
    ['25C', 298.15],
    ['25 ℃', 298.15],
    ['−40 °C', 233.15],
    ['26.85 ° C', 300],
    ['27 °C', 300.15],
    ['300 K', 300],
    ['300K', 300],
    ['−273.14', 0.01],
  ])('reads %s as %d K', (text, wanted) => expect(value(readTemperature(text))).toBe(wanted))

  it('refuses what is not above absolute zero', () => {
    for (const text of ['-273.15', '−300 °C', '0 K', '-5 K'])
      expect(problem(readTemperature(text))?.code).toBe('value-out-of-range')
  })

  it.each(['', '°C', '25 F', '25k', '300 mK', '300 K °C', '25 °C °C', 'warm'])('refuses %j', (text) =>
    expect(problem(readTemperature(text))?.detail).toMatch(/\.$/),
  )
})
