import { describe, expect, it } from 'vitest'
import { compileComplexFormula } from '#shared/formula/compile-complex'
import { selectInPlace } from '#shared/numerics/select'
import { seededRandom } from '#shared/numerics/random'
import { compileSquaredMagnitude } from '#shared/tolerance/rational-formula'
import { CHECK_CIRCUITS, readCheck } from '../../support/circuits'
import { formulaOf } from '../../support/formulas'

const squared = (text: string, names: string[]) => compileSquaredMagnitude(formulaOf(text, 'response'), names)

/** The same formula evaluated in complex numbers, node by node. */
function complexSquared(text: string, values: Record<string, number>, frequencyHz: number): number {
  const out = new Float64Array(2)
  const h = compileComplexFormula(formulaOf(text, 'response'), Object.keys(values))
  h(Float64Array.from(Object.values(values)), 0, 2 * Math.PI * frequencyHz, out)
  return out[0]! ** 2 + out[1]! ** 2
}

function check(text: string, values: Record<string, number>, frequenciesHz: number[]) {
  const h = squared(text, Object.keys(values))!
  const out = new Float64Array(frequenciesHz.length)
  const rates = Float64Array.from(frequenciesHz, (f) => (2 * Math.PI * f) ** 2)
  h(Float64Array.from(Object.values(values)), rates, out)
  expect(out).toAgreeWith(
    frequenciesHz.map((f) => complexSquared(text, values, f)),
    { relative: 1e-10 },
  )
}

describe('a response that is rational in s', () => {
  const circuits = CHECK_CIRCUITS.flatMap((name) => {
    const { closed_form, parts, response } = readCheck(name)
    return Object.entries(closed_form.H).map(([label, text]): [string, string, Record<string, number>, number[]] => [
      `${name} at ${label}`,
      text,
      parts,
      response.frequency_Hz,
    ])
  })
  it.each(circuits)('is the same as in complex numbers: %s', (_, text, parts, frequencies) => {
    check(text, parts, frequencies)
  })

  const values = { R1: 1e3, R2: 4.7e3, C1: 1e-9, C2: 33e-12 }
  it.each([
    'par(R2, 1/(s*C1))/(R1 + par(R2, 1/(s*C1)))',
    'ser(R1, 1/(s*C1))/ser(R1, R2, 1/(s*C1))',
    '1/(1 + s*R1*C1)^3',
    '(1 + s*R2*C2)^2/(1 + s*R1*C1)^5',
    '1/((1 + s*R1*C1)^4*(1 + s*R2*C2)^4)',
    '(s*R1*C1)^-2 - 1',
    '-exp(-R2/R1)/(1 + s*R1*C1 - (s*R1*C1)/(1 + s*R2*C2))',
    'R2/R1',
  ])('is the same as in complex numbers: %s', (text) => {
    check(text, values, [0.1, 1e3, 159e3, 1e6, 1e9])
  })

  it.each(['sqrt(s*R1*C1)', 'sqrt(R1 - R2)/(s*C1)', 'exp(-s*R1*C1)', '1/(1 + s*R1*C1)^9'])(
    'is left to complex numbers otherwise: %s',
    (text) => {
      expect(squared(text, Object.keys(values))).toBeNull()
    },
  )
})

describe('selection', () => {
  it('finds every order statistic, also among equal and infinite values', () => {
    const random = seededRandom(8)
    for (let run = 0; run < 200; run++) {
      const size = 1 + Math.floor(random() * 40)
      const values = Float64Array.from({ length: size }, () =>
        random() < 0.1 ? -Infinity : Math.floor(random() * 12) / 4,
      )
      const sorted = values.slice().sort()
      const k = Math.floor(random() * size)
      expect(selectInPlace(values, k)).toBe(sorted[k])
      expect(values.slice(0, k).every((x) => x <= sorted[k]!)).toBe(true)
      expect(values.slice(k).every((x) => x >= sorted[k]!)).toBe(true)
    }
  })
})
