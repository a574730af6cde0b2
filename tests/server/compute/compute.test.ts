import { readFileSync } from 'node:fs'
import { beforeAll, describe, expect, it } from 'vitest'
import type { ComputeAnswer } from '#shared/contracts/compute'
import type { Answer, Client } from '../../support/server'
import { shelfServer } from '../../support/shelf'

let reader: Client
const compute = (code: string, body: unknown): Promise<Answer> => reader.post(`/api/blocks/${code}/compute`, body)
const computed = async (code: string, body: unknown): Promise<ComputeAnswer> => {
  const answer = await compute(code, body)
  expect(answer.status, answer.text).toBe(200)
  return answer.body as ComputeAnswer
}

beforeAll(async () => {
  reader = await (await shelfServer()).signedIn('reader')
}, 90_000)

// Source of each: the header of the file (ngspice .ac with a nullor, closed forms); tolerances as it states them.
const CHECKS: [string, string, Record<string, string>][] = [
  ['lp1-inv', 'lp1-inverting', { f_c: 'f_3dB' }],
  ['hp1-inv', 'hp1-inverting', { f_c: 'f_3dB' }],
  ['bp1-wide', 'bp-wide-inverting', { f_1: 'f_3dB_low', f_2: 'f_3dB_high', K_0: '-peak_gain' }],
  ['lp1-ni', 'lp1-noninverting-gain', { f_c: 'f_3dB' }],
  ['lp2-sku', 'lp2-sallen-key-unity', { f_c: 'f_3dB' }],
  ['lp2-mfb', 'lp2-mfb', { f_c: 'f_3dB' }],
]

describe.each(CHECKS)('%s at the values of the check circuit', (code, file, measuredNames) => {
  const check = JSON.parse(readFileSync(`tests/checks/circuits/${file}.json`, 'utf8'))
  const ideal = check.response.out.ideal as { re: number[]; im: number[] }
  const frequenciesHz = check.response.frequency_Hz as number[]

  it('has the response of the circuit within 1e-6·|H| + 1e-8·max|H|', async () => {
    const { response, values, parts } = await computed(code, { values: check.parts, frequenciesHz })
    expect(values).toEqual(check.parts)
    expect(Object.values(parts).every((part) => part.state === 'held')).toBe(true)
    const most = Math.max(...ideal.re.map((re, k) => Math.hypot(re, ideal.im[k]!)))
    const strain = frequenciesHz.map((_, k) => {
      const difference = Math.hypot(response.re[k]! - ideal.re[k]!, response.im[k]! - ideal.im[k]!)
      return difference / (1e-6 * Math.hypot(ideal.re[k]!, ideal.im[k]!) + 1e-8 * most)
    })
    expect(Math.max(...strain)).toBeLessThanOrEqual(1)
  })

  it('has its closed-form figures to 1e-9 and those measured on the curve to 1e-6', async () => {
    const { results } = await computed(code, { values: check.parts })
    const shared = Object.keys(check.figures).filter((name) => results[name])
    expect(shared.length).toBeGreaterThan(0)
    for (const name of shared) expect(results[name]!.value / check.figures[name], name).toBeCloseTo(1, 9)
    const measured = check.measured.out.ideal
    for (const [name, path] of Object.entries(measuredNames)) {
      const value = path
        .replace(/^-/, '')
        .split('.')
        .reduce((at, key) => at[key], measured) as unknown as number
      expect(results[name]!.value / ((path.startsWith('-') ? -1 : 1) * value), name).toBeCloseTo(1, 6)
    }
  })

  it('agrees with itself', async () => {
    const { selfCheck } = await computed(code, { values: check.parts })
    expect(selfCheck.outcome).toBe('agrees')
    expect(selfCheck.worstRelativeDifference).toBeLessThan(1e-6)
  })
})

describe('computing', () => {
  it('solves the parts that are not held and never changes the held ones', async () => {
    const { values, parts, results } = await computed('lp1-inv', {
      targets: { f_c: '2.4 kHz', K: -2 },
      values: { Cf: '2n2' },
    })
    expect(values['Cf']).toBe(2.2e-9)
    expect([parts['Cf']!.state, parts['Rf']!.state, parts['Ri']!.state]).toEqual(['held', 'solved', 'solved'])
    // 1/(2π · 2.4 kHz · 2.2 nF) = 30.14 kΩ, on E96 30.1 kΩ; half of it 15.05 kΩ, on E96 15.0 kΩ. IEC 60063.
    expect([values['Rf'], values['Ri']]).toEqual([30.1e3, 15e3])
    expect(results['f_c']).toMatchObject({ target: 2400, unit: 'Hz' })
    expect(results['f_c']!.relativeError).toBeCloseTo(results['f_c']!.value / 2400 - 1, 12)
  })

  it('takes text and numbers alike', async () => {
    const asText = await computed('lp1-inv', { values: { Ri: '22.1k', Rf: '44k2', Cf: '1.5 nF' } })
    const asNumbers = await computed('lp1-inv', { values: { Ri: 22100, Rf: 44200, Cf: 1.5e-9 } })
    expect(asText).toEqual(asNumbers)
  })

  it('takes a level for a gain and gives it the sign of the block', async () => {
    const { results } = await computed('lp1-inv', { targets: { K: '6.0206 dB' } })
    expect(results['K']!.target).toBeCloseTo(-2, 5)
  })

  it('stands the figure under the conditions beside the ideal one, and counts the error from it', async () => {
    const { results } = await computed('hp1-inv', {
      values: { Ri: 10e3, Ci: 100e-9, Rf: 100e3 },
      targets: { K: -10 },
      conditions: { sourceOhm: 1000 },
    })
    // The source adds to Ri: −100k/(10k + 1k). Textbook.
    expect(results['K']!.value).toBeCloseTo(-10, 12)
    expect(results['K']!.underConditions).toBeCloseTo(-100 / 11, 9)
    expect(results['K']!.relativeError).toBeCloseTo(1 - 10 / 11, 9)
  })

  it('answers with a revision for good at its own address', async () => {
    const { body } = await reader.post('/api/blocks/LP2-MFB/revisions/1/compute', {})
    expect(body.block).toEqual({ code: 'lp2-mfb', revision: 1 })
    expect(body.response.frequenciesHz).toHaveLength(61)
    expect((await reader.post('/api/blocks/lp2-mfb/revisions/9/compute', {})).status).toBe(404)
    expect((await compute('nothing', {})).status).toBe(404)
  })

  it('says what is out of reach and names the nearest', async () => {
    const { infeasible } = await computed('bp1-wide', { targets: { f_1: '1 kHz', f_2: '2 kHz' } })
    expect(infeasible[0]).toMatchObject({ part: 'Ri', target: 'f_2', say: expect.stringContaining('5.83') })
    expect(infeasible[0]!.nearest! / 5828.5).toBeCloseTo(1, 6)
  })
})

describe('what cannot be computed', () => {
  it.each([
    [{ values: { Cf: '4k7' } }, '#/values/Cf', 'unit-wrong'],
    [{ values: { Rf: '4.7 nF' } }, '#/values/Rf', 'unit-wrong'],
    [{ values: { Rf: -1000 } }, '#/values/Rf', 'value-not-positive'],
    [{ values: { Rf: '-1k' } }, '#/values/Rf', 'value-not-positive'],
    [{ values: { Rf: 0 } }, '#/values/Rf', 'value-not-positive'],
    [{ values: { Rf: '0' } }, '#/values/Rf', 'value-not-positive'],
    [{ values: { Rf: 1e15 } }, '#/values/Rf', 'value-out-of-range'],
    [{ values: { Rf: 1e-9 } }, '#/values/Rf', 'value-out-of-range'],
    [{ values: { Cf: 100 } }, '#/values/Cf', 'value-out-of-range'],
    [{ values: { Cf: 1e-20 } }, '#/values/Cf', 'value-out-of-range'],
    [{ values: { Rx: '1k' } }, '#/values/Rx', 'part-unknown'],
    [{ values: { 'a/b~c': '1k' } }, '#/values/a~1b~0c', 'part-unknown'],
    [{ values: { constructor: '1k' } }, '#/values/constructor', 'part-unknown'],
    [{ values: { toString: 1 } }, '#/values/toString', 'part-unknown'],
    [{ values: { Rf: '1,000' } }, '#/values/Rf', 'value-not-read'],
    [{ values: { Rf: '' } }, '#/values/Rf', 'value-not-read'],
    [{ values: { Rf: 'NaN' } }, '#/values/Rf', 'value-not-read'],
    [{ values: { Rf: 'Infinity' } }, '#/values/Rf', 'value-not-read'],
    [{ targets: { f_c: '2.4 kΩ' } }, '#/targets/f_c', 'unit-wrong'],
    [{ targets: { f_c: 0 } }, '#/targets/f_c', 'value-not-positive'],
    [{ targets: { f_c: -5 } }, '#/targets/f_c', 'value-not-positive'],
    [{ targets: { f_d: 5 } }, '#/targets/f_d', 'result-unknown'],
    [{ targets: { Z_in: 5 } }, '#/targets/Z_in', 'target-not-settable'],
    [{ targets: { K: 2 } }, '#/targets/K', 'target-wrong-sign'],
    [{ targets: { K: 0 } }, '#/targets/K', 'value-not-positive'],
    [{ conditions: { sourceOhm: '50 pF' } }, '#/conditions/sourceOhm', 'unit-wrong'],
    [{ conditions: { sourceOhm: -50 } }, '#/conditions/sourceOhm', 'value-not-positive'],
    [{ conditions: { loadOhm: 0 } }, '#/conditions/loadOhm', /value/],
    [{ conditions: { load: 5 } }, '#/conditions/load', 'condition-unknown'],
    [{ series: { Rf: 'E13' } }, '#/series/Rf', 'series-unknown'],
    [{ series: { R9: 'E24' } }, '#/series/R9', 'part-unknown'],
    [{ output: 'elsewhere' }, '#/output', 'output-unknown'],
    [{ frequenciesHz: [] }, '#/frequenciesHz', 'request-not-valid'],
    [{ frequenciesHz: [-1] }, '#/frequenciesHz/0', 'request-not-valid'],
    [{ frequenciesHz: ['1k'] }, '#/frequenciesHz/0', 'request-not-valid'],
    [{ frequenciesHz: Array(20_001).fill(1) }, '#/frequenciesHz', 'request-not-valid'],
    [{ values: [] }, '#/values', 'request-not-valid'],
    [{ values: { Rf: [1] } }, '#/values/Rf', 'request-not-valid'],
    [{ values: { Rf: null } }, '#/values/Rf', 'request-not-valid'],
    [{ goodEnough: 9 }, '#/goodEnough', 'request-not-valid'],
    [{ results: { f_c: 1 } }, '#/results', 'request-not-valid'],
    [[], '#', 'request-not-valid'],
  ])('%j is answered at %s', async (body, pointer, code) => {
    const answer = await compute('lp1-inv', body)
    expect([400, 422]).toContain(answer.status)
    expect(answer.headers.get('content-type')).toContain('application/problem+json')
    expect(answer.body.type.replace('/problems/', '')).toMatch(code)
    expect(answer.body.errors[0].pointer).toBe(pointer)
    expect(answer.body.errors[0].detail).toMatch(/[.?]$/)
  })

  it('tells all at once', async () => {
    const { body } = await compute('lp1-inv', { values: { Rx: 1, Cf: '4k7' }, targets: { f_d: 1 } })
    expect(body.errors.map((one: { pointer: string }) => one.pointer)).toEqual([
      '#/values/Rx',
      '#/values/Cf',
      '#/targets/f_d',
    ])
  })

  it('offers the near name and the other sign', async () => {
    expect((await compute('lp1-inv', { values: { rf: '1k' } })).body.detail).toContain('Did you mean Rf?')
    expect((await compute('lp1-inv', { targets: { K: 2 } })).body.detail).toBe('This stage inverts: −2?')
  })

  it.each(['null', '5', '"x"', '{', '{"values":{"Rf":1e999}}', '[{}]'])('takes %j for no request', async (text) => {
    const answer = await compute('lp1-inv', text)
    expect([400, 422]).toContain(answer.status)
    expect(answer.body.detail).toMatch(/[.?]$/)
  })

  it('lets no name reach what every object has', async () => {
    const before = await computed('lp1-inv', {})
    for (const name of ['__proto__', 'constructor', 'prototype', 'toString', 'hasOwnProperty', 'valueOf'])
      for (const group of ['values', 'targets', 'conditions', 'series']) {
        const { status } = await compute('lp1-inv', `{"${group}":{"${name}":"E24"}}`)
        expect(status === 422 || (name === '__proto__' && status === 200), `${group} ${name} ${status}`).toBe(true)
        await compute('lp1-inv', `{"${group}":{"${name}":{"polluted":1}}}`)
      }
    expect(({} as Record<string, unknown>)['polluted']).toBeUndefined()
    expect(await computed('lp1-inv', {})).toEqual(before)
  })

  it('is never a fault of the server, however far the values lie apart', async () => {
    const extremes = { R: [1e-3, 1e12, 1], C: [1e-17, 10, 1e-9] }
    for (const code of ['lp1-inv', 'hp1-inv', 'bp1-wide', 'lp1-ni', 'lp2-sku', 'lp2-mfb']) {
      const names = Object.keys((await computed(code, {})).values)
      for (let k = 0; k < 3 ** Math.min(names.length, 4); k++) {
        const values = Object.fromEntries(
          names.map((name, n) => [name, extremes[name[0] as 'R' | 'C'][Math.floor(k / 3 ** (n % 4)) % 3]]),
        )
        const answer = await compute(code, { values, targets: {}, frequenciesHz: [0, 1e-15, 1, 1e15] })
        expect([200, 422], `${code} ${JSON.stringify(values)} ${answer.text.slice(0, 300)}`).toContain(answer.status)
      }
    }
  }, 120_000)
})
