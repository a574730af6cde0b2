import { describe, expect, it } from 'vitest'
import { prepareCircuit } from '#shared/analysis/nodal-analysis'
import { integratedNoise } from '#shared/noise/integrated-noise'
import { outputNoise } from '#shared/noise/output-noise'
import { CHECK_CIRCUITS, amplifiersOfCheck, netlistOfCheck, readCheck, valuesOfCheck } from '../../support/circuits'

const CASES = CHECK_CIRCUITS.flatMap((name) =>
  Object.keys(readCheck(name).outputs).flatMap((label) =>
    (['ideal', 'one_pole'] as const).map((model) => ({ name, label, model })),
  ),
)

// Sources, as each file's header says: resistors ngspice-39 `.noise` at 27 °C, e_n and i_n the adjoint network in NumPy;
// 1e-4 relative for densities, 1e-3 for integrals.
describe.each(CASES)('$name at $label, op-amp $model', ({ name, label, model }) => {
  const { noise } = readCheck(name)
  const wanted = noise.outputs[label]![model]
  const prepared = prepareCircuit(netlistOfCheck(name), { amplifiers: amplifiersOfCheck(name, model) })
  const conditions = { tempKelvin: noise.temperature_K, output: label }

  it('gives the density of every contributor, and no other', () => {
    const got = outputNoise(prepared, valuesOfCheck(name), noise.frequency_Hz, conditions)
    expect(got.densityVoltPerRtHz).toAgreeWith(wanted.density_total, { relative: 1e-4 })
    expect(Object.keys(got.byContributor).sort()).toEqual(Object.keys(wanted.density_by_contributor).sort())
    for (const [contributor, density] of Object.entries(wanted.density_by_contributor))
      expect(got.byContributor[contributor], contributor).toAgreeWith(density, { relative: 1e-4 })
  })

  it('gives the integral over the band, by contributor', () => {
    const got = integratedNoise(prepared, valuesOfCheck(name), noise.band_Hz, conditions)
    expect(got.integratedVolt).toAgreeWith(wanted.integrated_total, { relative: 1e-3 })
    for (const [contributor, volt] of Object.entries(wanted.integrated_by_contributor))
      expect(got.integratedByContributor[contributor], contributor).toAgreeWith(volt, { relative: 1e-3 })
  })
})
