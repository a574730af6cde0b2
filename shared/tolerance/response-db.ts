import type { PreparedCircuit } from '../analysis/nodal-analysis'
import { response } from '../analysis/nodal-analysis'
import { compileComplexFormula } from '../formula/compile-complex'
import type { Formula } from '../formula/parse'
import type { FigureSet } from './figure-set'
import { circuitFigureSet, formulaScope } from './figure-set'
import { compileSquaredMagnitude } from './rational-formula'
import type { Spread } from './spread'

/** |H| in dB at frequencies, as a function of the parts' values; each frequency is a figure of its own. */
export interface ResponseDb extends FigureSet {
  frequenciesHz: Float64Array
}

const namesOf = (frequenciesHz: ArrayLike<number>) => Array.from(frequenciesHz, (f) => `${f} Hz`)

/** 20·log10 of a magnitude from its parts, without a root. */
const decibel = (re: number, im: number) => 10 * Math.log10(re * re + im * im)

/**
 * |H| by the formula of a response.
 * @param formula H(s), which may use results
 * @param results value formulas of the results that it uses
 * @param frequenciesHz Hz, ≥ 0
 * @throws {ProblemError} 'formula-not-read' when a name is unknown or a power is not a whole number
 */
export function formulaResponseDb(
  spreads: readonly Spread[],
  formula: Formula,
  frequenciesHz: ArrayLike<number>,
  results: Readonly<Record<string, Formula>> = {},
): ResponseDb {
  const scope = formulaScope(spreads, results)
  const squared = compileSquaredMagnitude(formula, scope.names)
  if (squared) {
    const squaredRate = Float64Array.from(frequenciesHz, (f) => (2 * Math.PI * f) ** 2)
    return {
      names: namesOf(frequenciesHz),
      frequenciesHz: Float64Array.from(frequenciesHz),
      evaluate(values, out) {
        squared(scope.fill(values), squaredRate, out)
        for (let k = 0; k < out.length; k++) out[k] = 10 * Math.log10(out[k]!)
      },
    }
  }
  const h = compileComplexFormula(formula, scope.names)
  const radPerSec = Float64Array.from(frequenciesHz, (f) => 2 * Math.PI * f)
  const value = new Float64Array(2)
  return {
    names: namesOf(frequenciesHz),
    frequenciesHz: Float64Array.from(frequenciesHz),
    evaluate(values, out) {
      const vector = scope.fill(values)
      for (let k = 0; k < radPerSec.length; k++) {
        h(vector, 0, radPerSec[k]!, value)
        out[k] = decibel(value[0]!, value[1]!)
      }
    },
  }
}

/**
 * |H| of the circuit by nodal analysis, under the conditions and with the op-amps it was prepared with.
 * @param output name of the output, the prepared one by default
 * @param fixedValues parts without a spread, by designator
 * @throws {ProblemError} 'part-missing', 'output-unknown'; 'circuit-singular' at the nominal values
 */
export function circuitResponseDb(
  spreads: readonly Spread[],
  prepared: PreparedCircuit,
  frequenciesHz: ArrayLike<number>,
  output?: string,
  fixedValues: Readonly<Record<string, number>> = {},
): ResponseDb {
  const set = circuitFigureSet(spreads, namesOf(frequenciesHz), (values) => {
    const { re, im } = response(prepared, { ...fixedValues, ...values }, frequenciesHz, output)
    return re.map((x, k) => decibel(x, im[k]!))
  })
  return { ...set, frequenciesHz: Float64Array.from(frequenciesHz) }
}
