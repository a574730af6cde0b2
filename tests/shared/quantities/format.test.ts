import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  formatDb,
  formatDecibel,
  formatDegrees,
  formatFrequency,
  formatPercent,
  formatQuantity,
  plainNumber,
  typedValue,
} from '#shared/quantities/format'
import { readQuantity, readTemperature } from '#shared/quantities/read'
import type { Unit } from '#shared/quantities/unit'
import { UNITS } from '#shared/quantities/unit'

const THIN = '\u2009'
const spaced = (text: string) => text.replaceAll(' ', THIN)

// Source: SI brochure, 9th edition, 3 and 5.4 (prefixes, space before the unit); ISO 80000-1 (true minus).
describe('formatQuantity', () => {
  it.each<[number, Unit, string]>([
    [44_200, 'Ω', '44.20 kΩ'],
    [330, 'Ω', '330.0 Ω'],
    [1e6, 'Ω', '1.000 MΩ'],
    [0.47, 'Ω', '470.0 mΩ'],
    [1.5e-9, 'F', '1.500 nF'],
    [1e-7, 'F', '100.0 nF'],
    [4.7e-6, 'F', '4.700 µF'],
    [1591.549, 'Hz', '1.592 kHz'],
    [-2.5e-3, 'V', '−2.500 mV'],
    [8e-9, 'V/√Hz', '8.000 nV/√Hz'],
    [2e-12, 'A/√Hz', '2.000 pA/√Hz'],
    [5e6, 'V/s', '5.000 V/µs'],
    [0.70711, '', '0.7071'],
    [-2, '', '−2.000'],
    [0.012345, '', '0.01235'],
    [123_456, '', '123500'],
    [1e7, '', '10.00 × 10⁶'],
    [298.15, 'K', '298.1 K'],
    [1e30, 'Ω', '1.000 × 10³⁰ Ω'],
    [1.5e-18, 'F', '1.500 × 10⁻¹⁸ F'],
    [0, 'Ω', '0 Ω'],
    [-0, 'V', '0 V'],
    [-0, '', '0'],
  ])('writes %d %s as %s', (value, unit, wanted) => expect(formatQuantity(value, unit)).toBe(spaced(wanted)))

  it('uses the micro sign, the capital omega and the thin space', () => {
    expect(formatQuantity(1e-6, 'F')).toBe('1.000\u2009\u00b5F')
    expect(formatQuantity(1, 'Ω')).toBe('1.000\u2009\u03a9')
    expect(formatQuantity(-1, 'V')).toBe('\u22121.000\u2009V')
  })

  it.each<[number, string]>([
    [999.94, '999.9 Ω'],
    [999.96, '1.000 kΩ'],
    [999_960, '1.000 MΩ'],
    [-999.96, '−1.000 kΩ'],
    [0.99999, '1.000 Ω'],
    [9.9999, '10.00 Ω'],
    [99.999, '100.0 Ω'],
  ])('carries the rounding of %d over to the next prefix', (value, wanted) => {
    expect(formatQuantity(value, 'Ω')).toBe(spaced(wanted))
  })

  it('drops zeros at the end of part values only when asked', () => {
    expect(formatQuantity(44_200, 'Ω', { trim: true })).toBe(spaced('44.2 kΩ'))
    expect(formatQuantity(1e5, 'Ω', { trim: true })).toBe(spaced('100 kΩ'))
    expect(formatQuantity(1.5e-9, 'F', { trim: true })).toBe(spaced('1.5 nF'))
  })

  it('takes other numbers of digits and the decimal comma', () => {
    expect(formatQuantity(1591.549, 'Hz', { digits: 6 })).toBe(spaced('1.59155 kHz'))
    expect(formatQuantity(1591.549, 'Hz', { digits: 2 })).toBe(spaced('1.6 kHz'))
    expect(formatQuantity(1591.549, 'Hz', { digits: 1 })).toBe(spaced('2 kHz'))
    expect(formatQuantity(159.1549, 'Hz', { digits: 2 })).toBe(spaced('160 Hz'))
    expect(formatQuantity(-1591.549, 'Hz', { decimalComma: true })).toBe(spaced('−1,592 kHz'))
  })

  // Source: IEC 60062:2016, as in tests/checks/rkm-codes.json.
  it.each<[number, Unit, string]>([
    [4700, 'Ω', '4k7'],
    [47, 'Ω', '47R'],
    [4.7, 'Ω', '4R7'],
    [0.47, 'Ω', 'R47'],
    [0.047, 'Ω', 'R047'],
    [0.1, 'Ω', 'R1'],
    [33.2, 'Ω', '33R2'],
    [1.5e6, 'Ω', '1M5'],
    [1e-13, 'F', spaced('100.0 fF')],
    [1.5e-9, 'F', '1n5'],
    [1e-7, 'F', '100n'],
    [4.7e-6, 'F', '4µ7'],
    [3.3, 'F', '3F3'],
    [1e-2, 'H', '10m'],
    [2400, 'Hz', spaced('2.400 kHz')],
    [0, 'Ω', spaced('0 Ω')],
  ])('writes %d %s as the code %s', (value, unit, wanted) => {
    expect(formatQuantity(value, unit, { coded: true })).toBe(wanted)
  })

  it('writes codes that read back to the value', () => {
    const part = fc.tuple(fc.integer({ min: 100, max: 999 }), fc.integer({ min: -14, max: 8 }))
    fc.assert(
      fc.property(part, fc.constantFrom<Unit>('Ω', 'F', 'H'), ([digits, power], unit) => {
        const value = Number(`${digits}e${power}`)
        const reading = readQuantity(formatQuantity(value, unit, { coded: true }).replace(/ × 10.*/, ''), unit)
        if (!/×/.test(formatQuantity(value, unit))) expect(reading).toEqual({ ok: true, value })
      }),
      { seed: 7 },
    )
  })

  it('gives a dash where there is no number', () => {
    for (const value of [NaN, Infinity, -Infinity]) {
      expect(formatQuantity(value, 'Ω')).toBe('–')
      expect(formatQuantity(value, 'F', { coded: true })).toBe('–')
      expect(formatPercent(value)).toBe('–')
      expect(formatDegrees(value)).toBe('–')
    }
    expect(formatDb(NaN)).toBe('–')
  })
})

describe('ratios, levels and angles', () => {
  it('writes a ratio as a level, whatever its sign', () => {
    expect(formatDecibel(-2)).toBe(spaced('6.02 dB'))
    expect(formatDecibel(0.5)).toBe(spaced('−6.02 dB'))
    expect(formatDecibel(1)).toBe(spaced('0.00 dB'))
    expect(formatDecibel(0)).toBe(spaced('−∞ dB'))
    expect(formatDb(-0.001)).toBe(spaced('0.00 dB'))
    expect(formatDb(-3.0103, { decimalComma: true })).toBe(spaced('−3,01 dB'))
  })

  it('writes a fraction in per cent, with a plus where asked', () => {
    expect(formatPercent(0.0002, { sign: true })).toBe(spaced('+0.02 %'))
    expect(formatPercent(-0.0123, { sign: true })).toBe(spaced('−1.23 %'))
    expect(formatPercent(-0.00001)).toBe(spaced('0.00 %'))
    expect(formatPercent(0.05, { trim: true })).toBe(spaced('5 %'))
    expect(formatPercent(1.234)).toBe(spaced('123 %'))
  })

  it('writes radians in degrees', () => {
    expect(formatDegrees(-Math.PI / 4)).toBe('−45.0°')
    expect(formatDegrees(-1e-9)).toBe('0.0°')
  })

  it('writes a frequency in engineering notation', () => expect(formatFrequency(2400)).toBe(spaced('2.400 kHz')))
})

describe('plainNumber', () => {
  it('is what a spreadsheet takes, with a point and no unit', () => {
    expect(plainNumber(1.5e-9)).toBe('1.5e-9')
    expect(plainNumber(44_200)).toBe('44200')
    expect(plainNumber(-0)).toBe('0')
    expect(plainNumber(NaN)).toBe('')
  })
})

describe('typedValue', () => {
  it.each<[number, Unit, string]>([
    [22_100, 'Ω', '22.1k'],
    [470, 'Ω', '470'],
    [1.5e-9, 'F', '1.5n'],
    [4.7e-6, 'F', '4.7u'],
    [2400, 'Hz', '2.4k'],
    [-2, '', '-2'],
    [0, 'Ω', '0'],
    [298.15, 'K', '298.15K'],
    [NaN, 'Ω', ''],
  ])('writes %d %s as %j', (value, unit, wanted) => expect(typedValue(value, unit)).toBe(wanted))

  it('reads back to exactly the same double', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), fc.constantFrom(...UNITS), (value, unit) => {
        const reading = readQuantity(typedValue(value, unit), unit, { allowNegative: true, allowZero: true })
        expect(reading).toEqual({ ok: true, value: value === 0 ? 0 : value })
      }),
      { numRuns: 2000, seed: 3 },
    )
  })

  it('reads back as the same temperature', () => {
    fc.assert(
      fc.property(fc.double({ min: 1, max: 1000, noNaN: true }), (kelvin) => {
        expect(readTemperature(typedValue(kelvin, 'K'))).toEqual({ ok: true, value: kelvin })
      }),
      { seed: 4 },
    )
  })
})
