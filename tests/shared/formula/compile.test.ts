import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compileCondition, compileFormula, evaluateOnce } from '#shared/formula/compile'
import type { ProblemError } from '#shared/problems'
import { formulaOf } from '../../support/formulas'

const raised = (run: () => unknown): ProblemError => {
  try {
    run()
  } catch (error) {
    return error as ProblemError
  }
  throw new Error('Nothing was raised.')
}

describe('values', () => {
  // By hand: 1/(2π · 30 kΩ · 2.2 nF) = 2411.4385317 Hz; 10 k ∥ 15 k = 6 k; 20·log10 2 = 6.0206 dB.
  it.each([
    ['1/(2*pi*Rf*Cf)', { Rf: 30e3, Cf: 2.2e-9 }, 2411.4385317],
    ['1/(2*pi*f_c*30k)', { f_c: 2411.4385317 }, 2.2e-9],
    ['par(a, b)', { a: 10e3, b: 15e3 }, 6e3],
    ['par(a, b, c)', { a: 3, b: 6, c: 2 }, 1],
    ['ser(a, b, c)', { a: 3, b: 6, c: 2 }, 11],
    ['par(a, b)', { a: 0, b: 5 }, 0],
    ['dB(K)', { K: -2 }, 6.020599913],
    ['sqrt(1 - 1/(2*Q^2) + sqrt((1 - 1/(2*Q^2))^2 + 1))', { Q: Math.SQRT1_2 }, 1],
    ['abs(K) + max(a, b, 3) - min(a, b, 3)', { K: -2, a: 1, b: 9 }, 10],
    ['exp(1)', {}, 2.718281828459045],
    ['ln(exp(2)) + log10(1000)', {}, 5],
    ['sin(pi/6) + cos(pi/3) + tan(pi/4)', {}, 2],
    ['atan(1) + atan2(1, -1)', {}, Math.PI],
    ['4*k_B*T*R', { T: 300, R: 10e3 }, 4 * 1.380649e-23 * 300 * 10e3],
  ])('%s', (text, values, wanted) => {
    expect(evaluateOnce(formulaOf(text), values)).toAgreeWith(wanted, { relative: 1e-9 })
  })

  it('takes its values from the places of the names', () => {
    const run = compileFormula(formulaOf('a - b'), ['b', 'x', 'a'])
    expect(run(Float64Array.of(1, 100, 5))).toBe(4)
    expect(run(Float64Array.of(2, 100, 5))).toBe(3)
  })

  it('asks for op-amp data, and has none without an op-amp', () => {
    const formula = formulaOf('GBW(U1)/A0(U2)')
    const data = (datum: string, ref: string) => (datum === 'GBW' && ref === 'U1' ? 10e6 : 1e5)
    expect(compileFormula(formula, [], data)(new Float64Array(0))).toBe(100)
    expect(compileFormula(formula, [])(new Float64Array(0))).toBeNaN()
  })

  it.each([
    ['1/(2*pi*Rii*Cf)', 9, '“Rii” is not a part, result or condition here. Did you mean Ri?', 1],
    ['Ri +\n Cff', 2, '“Cff” is not a part, result or condition here. Did you mean Cf?', 2],
    ['toString*2', 1, '“toString” is not a part, result or condition here.', 1],
    ['constructor', 1, '“constructor” is not a part, result or condition here.', 1],
  ])('names the unknown in %s with its place', (text, column, detail, line) => {
    const error = raised(() => compileFormula(formulaOf(text), ['Ri', 'Cf']))
    expect(error.problems[0]).toMatchObject({ code: 'formula-not-read', detail, line, column })
  })

  it('equals a direct recursion over the same tree', () => {
    fc.assert(
      fc.property(sum, fc.tuple(positive, positive, positive), (made, [a, b, c]) => {
        const got = evaluateOnce(formulaOf(made.text), { a, b, c })
        const wanted = made.value({ a, b, c })
        if (Number.isNaN(wanted)) expect(got).toBeNaN()
        else if (Number.isFinite(wanted)) expect(got).toAgreeWith(wanted, { relative: 1e-12 })
        else expect(got).toBe(wanted)
      }),
      { numRuns: 500, seed: 1 },
    )
  })

  it('runs a formula of ten operations a million times in well under a second', () => {
    const run = compileFormula(formulaOf('1/(2*pi*sqrt(R2*R3*C1*C2)) + par(R2, R3)'), ['R2', 'R3', 'C1', 'C2'])
    const values = Float64Array.of(10e3, 3e3, 47e-9, 4.7e-9)
    const start = performance.now()
    let total = 0
    for (let k = 0; k < 1e6; k++) total += run(values)
    expect(performance.now() - start).toBeLessThan(1000)
    expect(total).toBeGreaterThan(0)
  })
})

describe('conditions', () => {
  const holds = (text: string, values: Record<string, number> = {}) =>
    compileCondition(formulaOf(text, 'condition'), Object.keys(values))(Float64Array.from(Object.values(values)))

  it.each([
    ['f_c > 200 kHz', { f_c: 200001 }, true],
    ['f_c > 200 kHz', { f_c: 200000 }, false],
    ['f_c >= 200 kHz', { f_c: 200000 }, true],
    ['Q <= 8 and K < 0', { Q: 8, K: -1 }, true],
    ['Q < 8 or K < 0', { Q: 8, K: 1 }, false],
    ['Q == 8 and K != 1', { Q: 8, K: 2 }, true],
    ['not (Q > 1) or K > 5', { Q: 1, K: 0 }, true],
    ['not (Q > 1 or K > 5)', { Q: 1, K: 6 }, false],
    ['not (not (Q > 1 and K > 5))', { Q: 2, K: 6 }, true],
    ['Q > 9 and K > 9 or Q > 1', { Q: 2, K: 0 }, true],
    ['Q > 1 or K > 9 and Q > 9', { Q: 2, K: 0 }, true],
  ])('%s with %o is %s', (text, values, wanted) => expect(holds(text, values)).toBe(wanted))

  it.each(['x > 1', 'x < 1', 'x == 1', 'x != 1', 'not (x > 1)', 'not (x == 1)', 'not (x > 1 or x < 1)'])(
    '%s does not hold where x is not defined',
    (text) => expect(holds(text, { x: NaN })).toBe(false),
  )
})

/** A formula written out with all its parentheses, beside a function that does the same. */
interface Made {
  text: string
  value: (v: Record<'a' | 'b' | 'c', number>) => number
}

const positive = fc.double({ min: 0.01, max: 1000, noNaN: true })

const { sum } = fc.letrec<{ sum: Made; leaf: Made; pair: Made; called: Made }>((tie) => ({
  leaf: fc.oneof(
    fc
      .constantFrom('a' as const, 'b' as const, 'c' as const)
      .map((name) => ({ text: name, value: (v) => v[name] }) as Made),
    fc
      .constantFrom(['2', 2], ['3k', 3e3], ['4n7', 4.7e-9], ['1.5 kHz', 1500], ['pi', Math.PI])
      .map(([text, number]) => ({ text, value: () => number }) as Made),
  ),
  pair: fc.tuple(tie('sum'), tie('sum'), fc.constantFrom('+', '-', '*', '/', '^')).map(([x, y, operator]) => ({
    text: `(${x.text}) ${operator} (${y.text})`,
    value: (v) => OPERATIONS[operator](x.value(v), y.value(v)),
  })),
  called: fc
    .tuple(tie('sum'), tie('sum'), fc.constantFrom('par', 'ser', 'min', 'max', 'atan2'))
    .map(([x, y, name]) => ({
      text: `-${name}(${x.text}, ${y.text})`,
      value: (v) => -FUNCTIONS[name](x.value(v), y.value(v)),
    })),
  sum: fc.oneof({ depthSize: 'small' }, tie('leaf'), tie('pair'), tie('called')),
}))

const OPERATIONS = {
  '+': (x: number, y: number) => x + y,
  '-': (x: number, y: number) => x - y,
  '*': (x: number, y: number) => x * y,
  '/': (x: number, y: number) => x / y,
  '^': (x: number, y: number) => Math.pow(x, y),
}
const FUNCTIONS = {
  par: (x: number, y: number) => 1 / (1 / x + 1 / y),
  ser: (x: number, y: number) => x + y,
  min: Math.min,
  max: Math.max,
  atan2: Math.atan2,
}
