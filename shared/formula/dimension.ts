import type { Reading } from '../problems'
import { unread } from '../problems'
import type { Unit } from '../quantities/unit'
import { compileFormula } from './compile'
import type { Formula } from './parse'
import { placeAt } from './place'
import type { Tree } from './tree'
import { columnOf } from './tree'
import { CONSTANTS, OPAMP_DATA } from './vocabulary'

/** Exponents of volt, ampere, second and kelvin; `any` for 0 and for a literal with a prefix but no unit. */
export type Dimension = { volt: number; ampere: number; second: number; kelvin: number } | 'any'

// Adding zero turns −0 into 0.
const of = (volt = 0, ampere = 0, second = 0, kelvin = 0): Dimension => ({
  volt: volt + 0,
  ampere: ampere + 0,
  second: second + 0,
  kelvin: kelvin + 0,
})

/** Dimensions of the units: an ohm is a volt an ampere, a farad an ampere second a volt. */
export const DIMENSIONS: Record<Unit, Dimension> = {
  '': of(),
  '%': of(),
  dB: of(),
  '°': of(),
  Ω: of(1, -1),
  F: of(-1, 1, 1),
  H: of(1, -1, 1),
  Hz: of(0, 0, -1),
  'rad/s': of(0, 0, -1),
  s: of(0, 0, 1),
  V: of(1),
  A: of(0, 1),
  K: of(0, 0, 0, 1),
  W: of(1, 1),
  'V/s': of(1, 0, -1),
  'V/√Hz': of(1, 0, 0.5),
  'A/√Hz': of(0, 1, 0.5),
}

const CONSTANT_DIMENSIONS: Record<keyof typeof CONSTANTS, Dimension> = { pi: of(), k_B: of(1, 1, 1, -1) }

/**
 * Dimension of a formula.
 * @param dimensions of the names in it
 * @returns the dimension, or 'formula-dimension' with what does not fit and its column
 * @example ohm × farad is a time; a sum of ohms and farads is refused
 */
export function dimensionOf(formula: Formula, dimensions: Readonly<Record<string, Dimension>>): Reading<Dimension> {
  const known = formula.kind === 'response' ? { ...dimensions, s: DIMENSIONS['rad/s'] } : dimensions
  try {
    return { ok: true, value: walk(formula.tree, known) }
  } catch (error) {
    if (error instanceof Mismatch)
      return unread('formula-dimension', error.message, placeAt(formula.text, error.column))
    throw error
  }
}

class Mismatch extends Error {
  constructor(
    message: string,
    readonly column: number,
  ) {
    super(message)
  }
}

const close = (a: number, b: number) => Math.abs(a - b) < 1e-9

/** True when two quantities may be added; `any` fits each. */
export const sameDimension = (a: Dimension, b: Dimension): boolean =>
  a === 'any' ||
  b === 'any' ||
  (close(a.volt, b.volt) && close(a.ampere, b.ampere) && close(a.second, b.second) && close(a.kelvin, b.kelvin))

const combine = (a: Dimension, b: Dimension, sign: 1 | -1): Dimension =>
  a === 'any' || b === 'any'
    ? 'any'
    : of(a.volt + sign * b.volt, a.ampere + sign * b.ampere, a.second + sign * b.second, a.kelvin + sign * b.kelvin)

function scaled(a: Dimension, n: number): Dimension {
  if (n === 0) return of()
  return a === 'any' ? a : of(n * a.volt, n * a.ampere, n * a.second, n * a.kelvin)
}

function walk(tree: Tree, known: Readonly<Record<string, Dimension>>): Dimension {
  switch (tree.type) {
    case 'number':
      return tree.unit ? DIMENSIONS[tree.unit] : tree.prefixed || tree.value === 0 ? 'any' : of()
    case 'name':
      if (Object.hasOwn(CONSTANTS, tree.name)) return CONSTANT_DIMENSIONS[tree.name as keyof typeof CONSTANTS]
      return Object.hasOwn(known, tree.name) ? known[tree.name]! : 'any'
    case 'opamp':
      return DIMENSIONS[OPAMP_DATA[tree.datum]]
    case 'minus':
      return walk(tree.arg, known)
    case 'not':
      walk(tree.arg, known)
      return of()
    case 'logic':
      walk(tree.left, known)
      walk(tree.right, known)
      return of()
    case 'comparison':
      alike([tree.left, tree.right], known, 'compares')
      return of()
    case 'call':
      return callDimension(tree, known)
    case 'arithmetic':
      return arithmeticDimension(tree, known)
  }
}

function arithmeticDimension(
  tree: Tree & { type: 'arithmetic' },
  known: Readonly<Record<string, Dimension>>,
): Dimension {
  if (tree.operator === '+' || tree.operator === '-')
    return alike([tree.left, tree.right], known, tree.operator === '+' ? 'adds' : 'subtracts')
  const left = walk(tree.left, known)
  if (tree.operator !== '^') return combine(left, walk(tree.right, known), tree.operator === '*' ? 1 : -1)
  requirePlain(walk(tree.right, known), tree.right, 'An exponent')
  const exponent = constantValue(tree.right)
  if (exponent !== null) return scaled(left, exponent)
  requirePlain(left, tree.left, 'A power with a varying exponent')
  return of()
}

/** The value of a tree without names and op-amp data, or null. */
function constantValue(tree: Tree): number | null {
  if (!isConstant(tree)) return null
  const formula: Formula = { text: '', kind: 'value', tree, names: new Set(), opampData: [] }
  const value = compileFormula(formula, [])(new Float64Array(0))
  return Number.isFinite(value) ? value : null
}

function isConstant(tree: Tree): boolean {
  if (tree.type === 'name') return Object.hasOwn(CONSTANTS, tree.name)
  if (tree.type === 'call') return tree.args.every(isConstant)
  if (tree.type === 'minus') return isConstant(tree.arg)
  return tree.type === 'arithmetic' ? isConstant(tree.left) && isConstant(tree.right) : tree.type === 'number'
}

function callDimension(tree: Tree & { type: 'call' }, known: Readonly<Record<string, Dimension>>): Dimension {
  switch (tree.name) {
    case 'sqrt':
      return scaled(walk(tree.args[0]!, known), 0.5)
    case 'abs':
      return walk(tree.args[0]!, known)
    case 'min':
    case 'max':
    case 'par':
    case 'ser':
      return alike(tree.args, known, `takes into ${tree.name}`)
    case 'atan2':
      alike(tree.args, known, 'takes into atan2')
      return of()
    default:
      requirePlain(walk(tree.args[0]!, known), tree.args[0]!, tree.name)
      return of()
  }
}

function requirePlain(found: Dimension, tree: Tree, what: string) {
  if (!sameDimension(found, of()))
    throw new Mismatch(`${what} takes a plain number; this is ${dimensionWords(found)}.`, columnOf(tree))
}

function alike(trees: Tree[], known: Readonly<Record<string, Dimension>>, verb: string): Dimension {
  let first: Dimension = 'any'
  for (const tree of trees) {
    const found = walk(tree, known)
    if (!sameDimension(first, found))
      throw new Mismatch(`This ${verb} ${dimensionWords(first)} and ${dimensionWords(found)}.`, columnOf(tree))
    if (first === 'any') first = found
  }
  return first
}

const NAMED: [Dimension, string][] = [
  [of(), 'a plain number'],
  [DIMENSIONS['Ω'], 'a resistance'],
  [DIMENSIONS.F, 'a capacitance'],
  [DIMENSIONS.H, 'an inductance'],
  [DIMENSIONS.s, 'a time'],
  [DIMENSIONS.Hz, 'a frequency'],
  [DIMENSIONS.V, 'a voltage'],
  [DIMENSIONS.A, 'a current'],
  [DIMENSIONS.K, 'a temperature'],
  [DIMENSIONS.W, 'a power'],
  [of(-1, 1), 'a conductance'],
  [DIMENSIONS['V/√Hz'], 'a noise density'],
  [DIMENSIONS['A/√Hz'], 'a current noise density'],
]

/** A dimension in words: "a time", or by its units, "V² A⁻¹". */
export function dimensionWords(dimension: Dimension): string {
  if (dimension === 'any') return 'a number of any unit'
  const named = NAMED.find(([one]) => sameDimension(one, dimension))
  if (named) return named[1]
  const units = [
    ['V', dimension.volt],
    ['A', dimension.ampere],
    ['s', dimension.second],
    ['K', dimension.kelvin],
  ] as const
  const factors = units.filter(([, n]) => n !== 0).map(([unit, n]) => (n === 1 ? unit : `${unit}^${n}`))
  return `a quantity in ${factors.join('·')}`
}
