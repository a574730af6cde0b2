import { expect, it } from 'vitest'
import { spiceNumber } from '#shared/spice/number'

// Source: scale factors of the SPICE2 user's guide (ERL-M520, 1975): T G MEG K M U N P F, MIL = 25.4e-6; letters after
// the scale are ignored, and so is a letter that is no scale.
it.each([
  ['10', 10],
  ['-.5', -0.5],
  ['4.7e-08', 4.7e-8],
  ['1E3', 1e3],
  ['1e+21', 1e21],
  ['3T', 3e12],
  ['2g', 2e9],
  ['1meg', 1e6],
  ['1MEGohm', 1e6],
  ['4.7k', 4700],
  ['4.7KOhm', 4700],
  ['10M', 10e-3],
  ['1u', 1e-6],
  ['1µF', 1e-6],
  ['1μF', 1e-6],
  ['4.7nF', 4.7e-9],
  ['33p', 33e-12],
  ['1f', 1e-15],
  ['1F', 1e-15],
  ['2a', 2e-18],
  ['10V', 10],
  ['10ohm', 10],
  ['1e', 1],
  ['2mil', 50.8e-6],
  ['1e3k', 1e6],
])('reads %s', (text, value) => expect(spiceNumber(text)).toBe(value))

it.each(['', 'k', '1 k', '4k7', '1e400', '--1', '0x10', '1_0', '.', 'NaN', 'Infinity', '1,5', '1e9999999999'])(
  'takes %j for no number',
  (text) => expect(spiceNumber(text)).toBeNull(),
)
