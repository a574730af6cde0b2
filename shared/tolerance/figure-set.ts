import type { ElementValues } from '../circuit/netlist/netlist'
import type { Evaluate } from '../formula/compile'
import { compileFormula } from '../formula/compile'
import type { Formula } from '../formula/parse'
import { ProblemError } from '../problems'
import type { Spread } from './spread'

/** Figures of a circuit as a function of its parts' values. */
export interface FigureSet {
  names: readonly string[]
  /**
   * @param values ohm, farad, henry in the order of the spreads
   * @param out receives the figures in the order of the names; NaN where one is not defined
   */
  evaluate(values: Float64Array, out: Float64Array): void
}

/** A vector that formulas read: designators, matched entries, results. */
export interface FormulaScope {
  names: readonly string[]
  /** Fills the vector for one build. @returns the same array each time */
  fill(values: Float64Array): Float64Array
}

/**
 * Results by formula, each of which may use others. A formula that names a matched entry reads the mean of its
 * designators; what the spread between them does is seen by figures of the circuit alone.
 * @param formulas value formulas by the name of their result
 * @throws {ProblemError} 'formula-not-read' when a name is unknown or a result needs itself
 */
export function formulaScope(spreads: readonly Spread[], formulas: Readonly<Record<string, Formula>>): FormulaScope {
  const entries = matchedEntries(spreads)
  const names = [...spreads.map(({ ref }) => ref), ...entries.keys()]
  const members = [...entries.values()]
  const programs: Evaluate[] = []
  const open = new Set<string>()
  const compile = (name: string) => {
    if (names.includes(name)) return
    if (open.has(name)) throw new ProblemError('formula-not-read', `The result ${name} needs itself.`)
    open.add(name)
    const formula = formulas[name]!
    for (const needed of formula.names) if (Object.hasOwn(formulas, needed)) compile(needed)
    programs.push(compileFormula(formula, names))
    names.push(name)
  }
  Object.keys(formulas).forEach(compile)
  const vector = new Float64Array(names.length)
  const first = spreads.length + members.length
  return {
    names,
    fill(values) {
      vector.set(values)
      members.forEach((slots, k) => {
        vector[spreads.length + k] = slots.reduce((sum, slot) => sum + values[slot]!, 0) / slots.length
      })
      for (let k = 0; k < programs.length; k++) vector[first + k] = programs[k]!(vector)
      return vector
    },
  }
}

function matchedEntries(spreads: readonly Spread[]): Map<string, number[]> {
  const entries = new Map<string, number[]>()
  spreads.forEach(({ ref, part }, slot) => {
    if (part !== undefined && part !== ref) entries.set(part, [...(entries.get(part) ?? []), slot])
  })
  return entries
}

/**
 * Figures given by formulas.
 * @throws {ProblemError} as formulaScope
 * @example formulaFigures(spreads, { f_0, Q, f_3dB }) // f_3dB may use f_0 and Q
 */
export function formulaFigures(spreads: readonly Spread[], formulas: Readonly<Record<string, Formula>>): FigureSet {
  const scope = formulaScope(spreads, formulas)
  const names = Object.keys(formulas)
  const slots = names.map((name) => scope.names.indexOf(name))
  return {
    names,
    evaluate(values, out) {
      const vector = scope.fill(values)
      for (let k = 0; k < slots.length; k++) out[k] = vector[slots[k]!]!
    },
  }
}

/**
 * Figures found on the circuit.
 * @param find figures in the order of the names, from values by designator; the record is used again for each build
 * @throws {ProblemError} what finding them at the nominal values throws, a singular circuit included
 */
export function circuitFigureSet(
  spreads: readonly Spread[],
  names: readonly string[],
  find: (values: ElementValues) => ArrayLike<number>,
): FigureSet {
  const record: Record<string, number> = {}
  for (const { ref, nominal } of spreads) record[ref] = nominal
  find(record)
  return {
    names,
    evaluate(values, out) {
      spreads.forEach(({ ref }, k) => (record[ref] = values[k]!))
      const found = unlessSingular(() => find(record))
      for (let k = 0; k < names.length; k++) out[k] = found?.[k] ?? NaN
    },
  }
}

/** A build whose equations have no unique solution has no figures; every other problem is the caller's. */
function unlessSingular<T>(find: () => T): T | undefined {
  try {
    return find()
  } catch (error) {
    if (error instanceof ProblemError && error.code === 'circuit-singular') return undefined
    throw error
  }
}
