import { describe, expect, it } from 'vitest'
import { isPreferred } from '#shared/preferred-values/lookup'
import { SERIES_NAMES } from '#shared/preferred-values/series'
import { HOUSE_STOCK, inStock, stockValues } from '#shared/preferred-values/stock'

// The stock itself is invented, demonstration data.
const KINDS = ['resistor', 'capacitor', 'inductor'] as const

describe('the house stock', () => {
  it('has lines that begin and end with values of their own series', () => {
    for (const line of HOUSE_STOCK) {
      expect(line.to).toBeGreaterThan(line.from)
      expect(isPreferred(line.from, line.series) && isPreferred(line.to, line.series)).toBe(true)
      expect(line.tolerance).toBeGreaterThan(0)
      expect(line.tolerance).toBeLessThan(0.25)
    }
  })

  it('offers only values that it holds, in the series asked for, ascending', () => {
    for (const kind of KINDS)
      for (const series of SERIES_NAMES) {
        const values = stockValues(kind, series)
        expect(values.length).toBeGreaterThan(0)
        expect(values.every((v) => inStock(v, kind, series) && isPreferred(v, series))).toBe(true)
        expect([...values].sort((a, b) => a - b)).toEqual(values)
      }
  })

  it('offers every value of a line in its own series', () => {
    for (const line of HOUSE_STOCK) {
      const values = stockValues(line.kind, line.series, line.from, line.to)
      expect(values[0]).toBe(line.from)
      expect(values.at(-1)).toBe(line.to)
    }
  })

  it('keeps to the range of the part', () => {
    expect(stockValues('capacitor', 'E6', 1e-9, 4e-9)).toEqual([1e-9, 1.5e-9, 2.2e-9, 3.3e-9])
    expect(stockValues('resistor', 'E24', 1e9, 1e10)).toEqual([])
    expect(stockValues('resistor', 'E24', 0, -1)).toEqual([])
    expect(stockValues('resistor', 'E24', 5000, 4000)).toEqual([])
  })

  it('does not lend the range of one line to the series of another', () => {
    // E96 ends at 1 MΩ, E24 goes on to 10 MΩ.
    expect(inStock(4.99e6, 'resistor')).toBe(false)
    expect(inStock(4.99e6, 'resistor', 'E96')).toBe(false)
    expect(inStock(5.1e6, 'resistor', 'E24')).toBe(true)
    expect(stockValues('resistor', 'E96', 4.9e6, 5.05e6)).toEqual([])
    // Above 10 nF capacitors are held in E12 and E6 only.
    expect(inStock(13e-9, 'capacitor', 'E24')).toBe(false)
    expect(inStock(12e-9, 'capacitor', 'E24')).toBe(true)
    expect(inStock(13e-10, 'capacitor', 'E24')).toBe(true)
  })

  it('knows what no store holds', () => {
    for (const kind of KINDS)
      for (const value of [0, -1e3, NaN, Infinity, 1e12]) expect(inStock(value, kind)).toBe(false)
    expect(inStock(4700, 'resistor')).toBe(true)
    expect(inStock(4700, 'capacitor')).toBe(false)
    expect(inStock(44_200, 'resistor', 'E24')).toBe(false)
  })

  it('takes a value that arithmetic left in the last digit for the value itself', () => {
    expect(inStock(4.7 * 1e-9, 'capacitor', 'E12')).toBe(true)
    expect(inStock(1e-11 * (1 + 1e-15), 'capacitor')).toBe(true)
  })
})
