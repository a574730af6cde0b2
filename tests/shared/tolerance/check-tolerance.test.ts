import { describe, expect, it } from 'vitest'
import { prepareCircuit } from '#shared/analysis/nodal-analysis'
import { polePairs, rationalTransferFunction } from '#shared/analysis/rational'
import { corners } from '#shared/tolerance/corners'
import { circuitFigureSet } from '#shared/tolerance/figure-set'
import { monteCarloAtOnce } from '#shared/tolerance/monte-carlo'
import { circuitResponseDb, formulaResponseDb } from '#shared/tolerance/response-db'
import { sensitivities } from '#shared/tolerance/sensitivities'
import { netlistOfCheck, readCheck } from '../../support/circuits'
import { formulaOf } from '../../support/formulas'
import { figuresOfCheck, spreadsOfCheck, TOLERANCE_CHECKS } from '../../support/tolerance'

// Source, as the file's header says: closed forms over all sign combinations; sensitivities by complex-step derivative;
// Monte Carlo with NumPy default_rng. Corners and sensitivities 1e-9, Monte Carlo within each figure's `accept`.
const EXACT = { relative: 1e-9 }
const SEED = 20260101

describe.each(TOLERANCE_CHECKS)('$circuit', (check) => {
  const spreads = spreadsOfCheck(check)
  const figures = figuresOfCheck(check)
  const names = Object.keys(check.figures)
  const found = corners(spreads, figures)
  const slopes = sensitivities(spreads, figures)

  it.each(names)('gives nominal and corners of %s, and where they are', (name) => {
    const wanted = check.figures[name]!
    const got = found.figures[name]!
    expect(found.method).toBe('all-corners')
    expect(got.nominal).toAgreeWith(wanted.nominal, EXACT)
    expect(got.least).toAgreeWith(wanted.corner_min, EXACT)
    expect(got.most).toAgreeWith(wanted.corner_max, EXACT)
    for (const [at, value] of [
      [got.leastAt, got.least],
      [got.mostAt, got.most],
    ] as const) {
      const values = Float64Array.from(spreads, ({ ref, nominal, tolerance }) => nominal * (1 + at[ref]! * tolerance))
      const out = new Float64Array(names.length)
      figures.evaluate(values, out)
      expect(out[figures.names.indexOf(name)]).toBe(value)
    }
  })

  it.each(names)('gives the sensitivities of %s, and its deviation to first order', (name) => {
    const wanted = check.figures[name]!
    const got = slopes[name]!
    for (const { ref } of spreads)
      expect(got.relative[ref]).toAgreeWith(wanted.sensitivity[ref]!, { relative: 1e-9, absolute: 1e-9 })
    expect(got.linearDeviation).toAgreeWith(wanted.monte_carlo.std_by_linear_theory, EXACT)
  })

  it('draws 10 000 builds whose figures are spread like those of NumPy', () => {
    const result = monteCarloAtOnce({ spreads, figures }, { seed: SEED })
    for (const name of names) {
      const { mean, std, percentiles, accept } = check.figures[name]!.monte_carlo
      const got = result.figures[name]!
      expect(got.mean).toAgreeWith(mean, { absolute: accept.mean })
      expect(got.standardDeviation).toAgreeWith(std, { relative: accept.std_relative })
      for (const p of [1, 5, 50, 95, 99] as const)
        expect(got.percentiles[p]).toAgreeWith(percentiles[p], { absolute: accept.percentiles_absolute[p] })
      expect(got.sampledMin).toBeGreaterThanOrEqual(found.figures[name]!.least)
      expect(got.sampledMax).toBeLessThanOrEqual(found.figures[name]!.most)
    }
  })

  const band = check.response_band
  const formula = formulaOf(readCheck(check.circuit).closed_form.H[band.output]!, 'response')
  const prepared = prepareCircuit(netlistOfCheck(check.circuit))
  it.each([
    ['formula', formulaResponseDb(spreads, formula, band.frequency_Hz)],
    ['circuit', circuitResponseDb(spreads, prepared, band.frequency_Hz, band.output)],
  ])('draws the response bands of NumPy from the %s', (_, response) => {
    const { bands } = monteCarloAtOnce({ spreads, figures, response }, { seed: SEED })
    band.frequency_Hz.forEach((_, k) => {
      // The file prints eight digits.
      expect(bands!.nominalDb[k]).toAgreeWith(band.nominal_dB[k]!, { absolute: 1e-6 })
      for (const p of [5, 50, 95] as const)
        expect(bands!.percentilesDb[p][k]).toAgreeWith(band.percentiles_dB[p][k]!, { absolute: band.accept_dB[k]! })
      expect(bands!.percentilesDb[1][k]).toBeLessThan(bands!.percentilesDb[5][k]!)
      expect(bands!.percentilesDb[99][k]).toBeGreaterThan(bands!.percentilesDb[95][k]!)
    })
  })
})

describe.each(TOLERANCE_CHECKS.filter(({ figures }) => figures.f_0))('$circuit from its circuit', (check) => {
  const spreads = spreadsOfCheck(check)
  const wanted = check.figures.f_0!
  const prepared = prepareCircuit(netlistOfCheck(check.circuit))
  const figures = circuitFigureSet(spreads, ['f_0'], (values) => {
    const [pair] = polePairs(rationalTransferFunction(prepared, values).poles)
    return [pair!.naturalHz]
  })

  it('has f_0 at its corners', () => {
    const { f_0 } = corners(spreads, figures).figures
    expect(f_0!.least).toAgreeWith(wanted.corner_min, EXACT)
    expect(f_0!.most).toAgreeWith(wanted.corner_max, EXACT)
  })

  it('has the sensitivities of f_0', () => {
    const { f_0 } = sensitivities(spreads, figures)
    for (const { ref } of spreads)
      expect(f_0!.relative[ref]).toAgreeWith(wanted.sensitivity[ref]!, { relative: 1e-9, absolute: 1e-9 })
  })
})
