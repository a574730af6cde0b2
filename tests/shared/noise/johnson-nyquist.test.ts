import { expect, it } from 'vitest'
import { divide } from '#shared/numerics/polynomial'
import { thermalNoise } from '#shared/noise/johnson-nyquist'
import { readCheck } from '../../support/circuits'

// Source: ngspice-39 `.noise` of the first-order inverting low-pass at 27 °C; it states 1e-4 relative.
it('gives the noise of R through R ∥ C over four decades', () => {
  const { parts, noise } = readCheck('lp1-inverting')
  const impedance = noise.frequency_Hz.map((f) =>
    divide({ re: 1, im: 0 }, { re: 1 / parts.Rf!, im: 2 * Math.PI * f * parts.Cf! }),
  )
  const across = { re: Float64Array.from(impedance, ({ re }) => re), im: Float64Array.from(impedance, ({ im }) => im) }
  const density = thermalNoise(parts.Rf!, across, noise.temperature_K)
  expect(density).toAgreeWith(noise.outputs.out!.ideal.density_by_contributor.Rf!, { relative: 1e-4 })
})

// Source: √(4kTR), common practice: 10 kΩ at 300 K makes 12.87 nV/√Hz.
it('gives 12.872 nV/√Hz for 10 kΩ at 300 K, as its docstring says', () => {
  const across = { re: Float64Array.of(10e3), im: Float64Array.of(0) }
  expect(thermalNoise(10e3, across, 300)).toAgreeWith([1.2872e-8], { relative: 5e-5 })
})

it.each([
  [0, 300, 'resistanceOhm is 0; it takes a number above zero.'],
  [1e3, -1, 'tempKelvin is -1; it takes a number above zero.'],
  [1e3, NaN, 'tempKelvin is NaN; it takes a number above zero.'],
])('refuses %d ohm at %d K', (ohm, kelvin, sentence) => {
  expect(() => thermalNoise(ohm, { re: Float64Array.of(1), im: Float64Array.of(0) }, kelvin)).toThrow(sentence)
})
