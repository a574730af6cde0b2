import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Reading } from '#shared/problems'
import { formatDb, formatDecibel, formatPercent, formatQuantity, typedValue } from '#shared/quantities/format'
import { readGain, readPercent, readQuantity, readTemperature } from '#shared/quantities/read'
import { UNITS } from '#shared/quantities/unit'

const DOORS: [string, (text: string) => Reading<unknown>][] = [
  ...UNITS.map((unit): [string, (text: string) => Reading<unknown>] => [
    `readQuantity ${unit}`,
    (text) => readQuantity(text, unit),
  ]),
  ['readGain', readGain],
  ['readPercent', readPercent],
  ['readTemperature', readTemperature],
]

const HOSTILE = [
  '1e400',
  '1e99999999999999999999999999999',
  '1e-99999999999999999999999999999',
  'NaN',
  'Infinity',
  '1\u0000k',
  '\u200f4k7\u200e',
  '4k7\u202e',
  '10\u2028x',
  '\ud800',
  '4k7\ud83d',
  '__proto__',
  '1 __proto__',
  '1constructor',
  '1toString',
  '4constructor7',
  '<img src=x onerror=alert(1)>',
  "10k'; DROP TABLE blocks; --",
  '${7*7}',
  '=1+1',
  '1'.repeat(100_000),
  '0'.repeat(100_000) + 'x',
  ' '.repeat(100_000) + '1',
  '1,'.repeat(50_000),
  '1.'.repeat(50_000),
  '\u0301'.repeat(100_000),
]

describe('hostile input', () => {
  it.each(DOORS)('%s refuses each with a clean sentence', (_, read) => {
    for (const text of HOSTILE) {
      const reading = read(text)
      expect(reading.ok, text.slice(0, 40)).toBe(false)
      if (reading.ok) continue
      expect(reading.problems[0].detail.length).toBeLessThan(300)
      // No character that turns the writing direction, ends the line or cannot be encoded reaches the page.
      expect(reading.problems[0].detail).not.toMatch(/[\p{C}\p{Zl}\p{Zp}]/u)
    }
  })

  it('tells too large from too small', () => {
    const code = (text: string) => {
      const reading = readQuantity(text, 'Ω')
      return reading.ok ? reading.value : reading.problems[0].detail
    }
    expect(code('1e99999999999999999999')).toContain('too large')
    expect(code('1e-99999999999999999999')).toContain('too small')
    expect(code('0e99999999999999999999')).toBe(0)
    expect(code('1e30')).toBe(1e30)
    expect(code('-0')).toBe(0)
  })

  it('reads a hundred thousand characters in no time', () => {
    const start = performance.now()
    for (const [, read] of DOORS) for (const text of HOSTILE) read(text)
    expect(performance.now() - start).toBeLessThan(500)
  })

  it('never throws and never gives a number that is not finite, whatever is typed', () => {
    const alphabet = fc.string({
      unit: fc.constantFrom(...'0123456789.,+-−eEkKmMµuRFHΩ %dBC°/√ \u00a0\u0000\u202e'),
      maxLength: 14,
    })
    fc.assert(
      fc.property(fc.oneof(alphabet, fc.string({ unit: 'binary' })), (text) => {
        for (const [, read] of DOORS) {
          const reading = read(text)
          if (!reading.ok) expect(reading.problems[0].detail).toMatch(/[.]$/)
          else if (typeof reading.value === 'number') expect(Number.isFinite(reading.value)).toBe(true)
          else expect(Number.isFinite((reading.value as { gain: number }).gain)).toBe(true)
        }
      }),
      { numRuns: 2000, seed: 60062 },
    )
  })

  it('formats any double without throwing', () => {
    fc.assert(
      fc.property(fc.double(), fc.constantFrom(...UNITS), fc.integer({ min: -5, max: 40 }), (x, unit, digits) => {
        for (const coded of [true, false])
          expect(formatQuantity(x, unit, { digits, coded })).toMatch(/^(?:–|[−\dRTGMkmµnpfFH.]+)/)
        expect(typeof (formatDecibel(x) + formatDb(x) + formatPercent(x) + typedValue(x, unit))).toBe('string')
      }),
      { seed: 60063 },
    )
  })
})
