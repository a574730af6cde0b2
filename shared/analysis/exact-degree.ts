import type { Field } from '../numerics/residues'
import { FIELDS, commonDegree, eliminate, interpolate, residue } from '../numerics/residues'
import type { Pencil } from './pencil'

/** Degree of det(G + sC) and multiplicity of its root at s = 0; both −1 where it is zero for every s. */
export interface Degrees {
  degree: number
  atOrigin: number
}

/** det(G + sC) modulo two primes, ascending powers of s: what is zero here is zero in fact. */
export type ExactDeterminant = [number[], number[]]

/**
 * The determinant of a pencil in exact arithmetic modulo two primes, by evaluation and interpolation. Values count as
 * the decimal numbers they are written as, so that matched parts cancel exactly.
 */
export function exactDeterminant(pencil: Pencil): ExactDeterminant {
  const bound = new Set(pencil.row.filter((_, k) => pencil.c[k] !== 0)).size
  return FIELDS.map((field) => {
    const g = residues(pencil.g, field)
    const c = residues(pencil.c, field)
    const matrix = new Float64Array(pencil.size ** 2)
    const values = Array.from({ length: bound + 1 }, (_, k) => {
      fill(matrix, pencil, g, c, k + 1, field)
      return eliminate(matrix, pencil.size, field).determinant
    })
    return interpolate(values, field)
  }) as ExactDeterminant
}

export function degreesOf(determinant: ExactDeterminant): Degrees {
  const degree = Math.max(...determinant.map((one) => one.findLastIndex((c) => c !== 0)))
  const origins = determinant.map((one) => one.findIndex((c) => c !== 0)).filter((k) => k >= 0)
  return { degree, atOrigin: origins.length ? Math.min(...origins) : -1 }
}

/** Number of roots, with multiplicity, that two determinants have in common; neither may be zero. */
export const commonRoots = (a: ExactDeterminant, b: ExactDeterminant): number =>
  Math.min(...FIELDS.map((field, k) => commonDegree(a[k]!, b[k]!, field)))

/**
 * Unknowns that a singular pencil leaves open: those not zero in one solution of (G + sC)x = 0.
 * @param steady true for s = 0, else any s
 * @returns indices; none when the matrix is not singular
 */
export function openUnknowns(pencil: Pencil, steady: boolean, field: Field = FIELDS[0]): number[] {
  const { size } = pencil
  const matrix = new Float64Array(size ** 2)
  const point = 48_611_077
  const g = residues(pencil.g, field)
  const c = residues(pencil.c, field)
  fill(matrix, pencil, g, c, steady ? 0 : point, field)
  const { column } = eliminate(matrix, size, field)
  if (column < 0) return []
  // The column hangs on those before it: an unknown takes part if the columns stay dependent only while it is there.
  const taking: number[] = []
  for (let k = 0; k < column; k++) {
    fill(matrix, pencil, g, c, steady ? 0 : point, field)
    if (rankWithout(matrix, size, column, k, field)) taking.push(k)
  }
  return [...taking, column]
}

/** Whether (G + sC)x = b has no unique solution, at s = 0 or at every s. */
export const isSingular = (pencil: Pencil, steady: boolean): boolean =>
  FIELDS.every((field) => openUnknowns(pencil, steady, field).length > 0)

/** Whether the columns 0 … last, all but one, are independent. */
function rankWithout(matrix: Float64Array, size: number, last: number, without: number, field: Field): boolean {
  const square = new Float64Array(size * size)
  let to = 0
  for (let from = 0; from <= last; from++) {
    if (from === without) continue
    for (let i = 0; i < size; i++) square[i * size + to] = matrix[i * size + from]!
    to++
  }
  return eliminate(square, size, field).column === to
}

const residues = (values: readonly number[], field: Field) => values.map((value) => residue(value, field))

function fill(matrix: Float64Array, pencil: Pencil, g: number[], c: number[], s: number, { prime }: Field) {
  matrix.fill(0)
  for (let k = 0; k < pencil.row.length; k++) {
    const product = c[k]! * s
    matrix[pencil.row[k]! * pencil.size + pencil.column[k]!] = (g[k]! + (product % prime)) % prime
  }
}
