import { describe, expect, it } from 'vitest'
import { prepareCircuit } from '#shared/analysis/nodal-analysis'
import type { ProblemCode } from '#shared/problems'
import { ProblemError } from '#shared/problems'
import { buildDrawer } from '#shared/tolerance/draw'
import { circuitFigureSet } from '#shared/tolerance/figure-set'
import type { MonteCarloResult, Study } from '#shared/tolerance/monte-carlo'
import { monteCarlo, monteCarloAtOnce } from '#shared/tolerance/monte-carlo'
import { circuitResponseDb, formulaResponseDb } from '#shared/tolerance/response-db'
import { spreadsOf } from '#shared/tolerance/spread'
import { formulaOf } from '../../support/formulas'
import { figuresOf } from '../../support/tolerance'
import { netlistOf } from '../../support/circuits'

const spreads = spreadsOf([
  { name: 'R', nominal: 10e3, tolerance: 0.01 },
  { name: 'C', nominal: 1e-9, tolerance: 0.05 },
])
const figures = figuresOf(spreads, { f_c: '1/(2*pi*R*C)', tau: 'R*C' })
const response = formulaResponseDb(spreads, formulaOf('1/(1 + s*R*C)', 'response'), [100, 15.9e3, 1e6])
const study: Study = { spreads, figures, response }

function drive(chunk: number): { result: MonteCarloResult; reports: number[] } {
  const run = monteCarlo(study, { seed: 5, builds: 1000 }, chunk)
  const reports: number[] = []
  for (;;) {
    const step = run.next()
    if (step.done) return { result: step.value, reports }
    reports.push(step.value.buildsDone)
  }
}

const refused = (run: () => unknown): ProblemError => {
  try {
    run()
  } catch (error) {
    if (error instanceof ProblemError) return error
  }
  throw new Error('nothing was refused')
}

describe('in chunks', () => {
  it('gives the same result whatever the chunk', () => {
    const { result } = drive(1)
    for (const chunk of [7, 250, 5000]) expect(drive(chunk).result).toEqual(result)
    expect(monteCarloAtOnce(study, { seed: 5, builds: 1000 })).toEqual(result)
  })

  it('reports progress, and stops when it is not asked for more', () => {
    expect(new Set(drive(300).reports)).toEqual(new Set([300, 600, 900, 1000]))
    let evaluated = 0
    const counted = { ...figures, evaluate: () => void evaluated++ }
    const run = monteCarlo({ spreads, figures: counted }, { seed: 1 }, 100)
    expect(run.next().value).toEqual({ buildsDone: 100, builds: 10_000 })
    run.return(undefined as never)
    expect(run.next().done).toBe(true)
    expect(evaluated).toBe(101)
  })

  it('gives other numbers for another seed', () => {
    const mean = (seed: number) => monteCarloAtOnce(study, { seed, builds: 100 }).figures.f_c!.mean
    expect(mean(1)).not.toBe(mean(2))
    expect(mean(1)).toBe(mean(1))
  })
})

describe('draws', () => {
  // Source: a normal distribution cut at ±3σ has variance σ²·(1 − 6·φ(3)/(2Φ(3) − 1)), φ(3) = 0.00443185,
  // 2Φ(3) − 1 = 0.9973002 (normal tables); a uniform one of half width a has a²/3.
  it.each([
    ['uniform' as const, 1 / Math.sqrt(3)],
    ['normal' as const, Math.sqrt(1 - (6 * 0.00443185) / 0.9973002) / 3],
  ])('spreads %s draws as its law says, never beyond the tolerance', (distribution, wanted) => {
    const [one] = spreadsOf([{ name: 'R', nominal: 1, tolerance: 0.1 }])
    const draw = buildDrawer([one!], distribution, 3)
    const values = new Float64Array(1)
    let [sum, squares, furthest] = [0, 0, 0]
    const builds = 40_000
    for (let k = 0; k < builds; k++) {
      draw(values)
      const off = (values[0]! - 1) / 0.1
      sum += off
      squares += off * off
      furthest = Math.max(furthest, Math.abs(off))
    }
    expect(furthest).toBeLessThanOrEqual(1 + 1e-12)
    expect(furthest).toBeGreaterThan(0.98)
    expect(Math.abs(sum / builds)).toBeLessThan((4 * wanted) / Math.sqrt(builds))
    expect(Math.sqrt(squares / builds)).toAgreeWith(wanted, { relative: 0.02 })
  })

  it('draws each designator of a matched part on its own', () => {
    const matched = spreadsOf([{ name: 'R1', refs: ['R1a', 'R1b'], nominal: 1e3, tolerance: 0.01 }])
    expect(matched.map(({ ref, part }) => [ref, part])).toEqual([
      ['R1a', 'R1'],
      ['R1b', 'R1'],
    ])
    const both = figuresOf(matched, { ratio: 'R1a/R1b', shown: 'R1' })
    const result = monteCarloAtOnce({ spreads: matched, figures: both }, { seed: 9 }).figures
    // Independent: the deviation of the ratio is √2 times, that of the mean 1/√2 times that of one (0.01/√3).
    expect(result.ratio!.standardDeviation).toAgreeWith((0.01 * Math.SQRT2) / Math.sqrt(3), { relative: 0.03 })
    expect(result.shown!.standardDeviation).toAgreeWith((10 * Math.SQRT1_2) / Math.sqrt(3), { relative: 0.03 })
  })

  it('leaves a part without tolerance at its value', () => {
    const fixed = spreadsOf([{ name: 'R', nominal: 4.7e3, tolerance: 0 }])
    const { R } = monteCarloAtOnce(
      { spreads: fixed, figures: figuresOf(fixed, { R: 'R*1' }) },
      { seed: 1, builds: 50 },
    ).figures
    expect([R!.sampledMin, R!.sampledMax, R!.standardDeviation]).toEqual([4.7e3, 4.7e3, 0])
    expect(R!.histogram.counts[0]).toBe(50)
  })
})

describe('yield', () => {
  it('counts builds against a figure and a line, together and one by one', () => {
    // R alone, uniform ±10 %: above 95 Ω are 3/4 of the builds, below 105 Ω are 3/4, between them 1/2.
    const one = spreadsOf([{ name: 'R', nominal: 100, tolerance: 0.1 }])
    const level = formulaResponseDb(one, formulaOf('R/(100 ohm)', 'response'), [1, 10, 100])
    const result = monteCarloAtOnce(
      {
        spreads: one,
        figures: figuresOf(one, { r: 'R*1' }),
        response: level,
        limits: [
          { kind: 'figure', figure: 'r', least: 95 },
          { kind: 'line', name: 'ceiling', fromHz: 5, toHz: 50, mostDb: 20 * Math.log10(1.05) },
        ],
      },
      { seed: 11 },
    ).yield!
    for (const { share } of result.byLimit) {
      expect(share.lower).toBeLessThan(0.75)
      expect(share.upper).toBeGreaterThan(0.75)
    }
    expect(result.all.lower).toBeLessThan(0.5)
    expect(result.all.upper).toBeGreaterThan(0.5)
    expect(result.all.builds).toBe(10_000)
    expect(result.sentence).toContain('uniform within tolerance')
    expect(result.sentence).toContain('10\u2009000 builds')
    expect(result.sentence).toContain('seed 11')
    expect(result.sentence).toContain('95\u2009% confidence')
  })

  it('counts a build without the figure as failing, and says how many there were', () => {
    const one = spreadsOf([{ name: 'R', nominal: 100, tolerance: 0.1 }])
    const { figures: got, yield: share } = monteCarloAtOnce(
      {
        spreads: one,
        figures: figuresOf(one, { root: 'sqrt(R - 100)' }),
        limits: [{ kind: 'figure', figure: 'root', least: -1 }],
      },
      { seed: 2, builds: 2000 },
    )
    expect(got.root!.undefinedBuilds).toBeGreaterThan(900)
    expect(share!.all.kept).toBe(2000 - got.root!.undefinedBuilds)
    expect(Number.isFinite(got.root!.mean)).toBe(true)
  })
})

describe('refusals', () => {
  const cases: [string, ProblemCode, () => unknown][] = [
    ['no build', 'value-out-of-range', () => monteCarloAtOnce(study, { seed: 1, builds: 0 })],
    ['half a build', 'value-out-of-range', () => monteCarloAtOnce(study, { seed: 1, builds: 10.5 })],
    ['a negative seed', 'value-out-of-range', () => monteCarloAtOnce(study, { seed: -1 })],
    [
      'a limit on no figure',
      'result-unknown',
      () => monteCarloAtOnce({ ...study, limits: [{ kind: 'figure', figure: 'Q' }] }, { seed: 1 }),
    ],
    [
      'a line where nothing is computed',
      'value-out-of-range',
      () => monteCarloAtOnce({ ...study, limits: [{ kind: 'line', name: 'a', fromHz: 2, toHz: 3 }] }, { seed: 1 }),
    ],
    [
      'more numbers than fit',
      'value-out-of-range',
      () =>
        monteCarloAtOnce(
          { ...study, response: { ...response, names: new Array<string>(1000).fill('1 Hz') } },
          { seed: 1, builds: 100_000 },
        ),
    ],
    [
      'a tolerance of all',
      'value-out-of-range',
      () => monteCarloAtOnce({ ...study, spreads: [{ ref: 'R', nominal: 1, tolerance: 1 }] }, { seed: 1 }),
    ],
    [
      'a value of nothing',
      'value-not-positive',
      () => monteCarloAtOnce({ ...study, spreads: [{ ref: 'R', nominal: 0, tolerance: 0 }] }, { seed: 1 }),
    ],
    ['a result that needs itself', 'formula-not-read', () => figuresOf(spreads, { a: 'b*2', b: 'a/2' })],
    ['an unknown name', 'formula-not-read', () => figuresOf(spreads, { a: 'R*Cx' })],
  ]
  it.each(cases)('refuses %s', (_, code, run) => {
    const error = refused(run)
    expect(error.code).toBe(code)
    expect(error.detail).toMatch(/\.$|\?$/)
  })

  const oneNode = (cards: string[], output?: string) => () => {
    const resistor = spreadsOf([{ name: 'R1', nominal: 1e3, tolerance: 0.01 }])
    return circuitResponseDb(resistor, prepareCircuit(netlistOf(cards)), [1e3], output)
  }
  it.each<[string, ProblemCode, () => unknown]>([
    ['floats', 'circuit-singular', oneNode(['R1 in 0 1k', 'R1 out a 1k'])],
    ['lacks a value', 'part-missing', oneNode(['R1 in out 1k', 'C1 out 0 1n'])],
    ['lacks the output', 'output-unknown', oneNode(['R1 in out 1k'], 'nowhere')],
  ])('refuses at once a circuit that %s', (_, code, run) => {
    expect(refused(run).code).toBe(code)
  })

  it('leaves a build without solution undefined, and passes on any other problem', () => {
    const failing = (code: ProblemCode) => {
      let builds = 0
      return circuitFigureSet(spreads, ['x'], () => {
        if (++builds > 2 && builds % 2) throw new ProblemError(code, 'No solution here.')
        return [1]
      })
    }
    const study = (code: ProblemCode) => () =>
      monteCarloAtOnce({ spreads, figures: failing(code) }, { seed: 1, builds: 10 })
    expect(study('circuit-singular')().figures.x!.undefinedBuilds).toBe(5)
    expect(refused(study('part-missing')).code).toBe('part-missing')
  })
})

it('draws 10 000 builds of a figure of five parts well within a second', () => {
  const five = spreadsOf(['R1', 'R2', 'R3', 'C1', 'C2'].map((name) => ({ name, nominal: 2, tolerance: 0.01 })))
  const set = figuresOf(five, { f_0: 'sqrt((R1+R2)/(R1*R2*R3*C1*C2))/(2*pi)' })
  const start = performance.now()
  monteCarloAtOnce({ spreads: five, figures: set }, { seed: 1 })
  expect(performance.now() - start).toBeLessThan(1000)
})
