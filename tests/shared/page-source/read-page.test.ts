import { describe, expect, it } from 'vitest'
import { readBlock } from '#shared/page-source/read-block'
import { PAGE_MAX, readPage } from '#shared/page-source/read-page'
import { readYaml } from '#shared/page-source/read-yaml'
import { writePage } from '#shared/page-source/write-page'
import { valueOf, type Problem, type Reading } from '#shared/problems'

const FRONT = [
  '---',
  'format: 1',
  'code: rc-demo',
  'title: RC and buffer',
  'function: low-pass',
  'topology: non-inverting',
  'order: 1',
  'owner: House',
  'summary: "Use it when one pole is enough."',
  '---',
]
const CIRCUIT = [
  '```circuit',
  'input in 1,3',
  'wire 1,3 2,3',
  'R R1 2,3 5,3',
  'wire 5,3 10,3',
  'C C1 7,3 7,6',
  'ground 7,6',
  'opamp U1 - 10,5 + 10,3 out 14,4',
  'wire 10,5 9,5 9,8 16,8 16,4',
  'wire 14,4 18,4',
  'output out 18,4',
  '```',
]
const CALCULATOR = [
  '```calculator',
  'parts:',
  '  R1: { default: 10k }',
  '  C1: { default: 10n }',
  'results:',
  '  f_c: { formula: 1/(2*pi*R1*C1), unit: Hz, meaning: corner, is: half-power frequency }',
  'response: 1/(1 + s*R1*C1)',
  '```',
]
const page = (...notes: string[]) => [...FRONT, ...notes, ...CIRCUIT, ...CALCULATOR, ''].join('\n')

const problemsOf = (reading: Reading<unknown>): Problem[] => (reading.ok ? [] : reading.problems)
const placesOf = (reading: Reading<unknown>) => problemsOf(reading).map((one) => [one.line, one.column])

describe('readPage', () => {
  it('takes a page apart, with the lines of the page', () => {
    const source = valueOf(readPage(page('At :value[f_c] see [it](block:LP1-inv@3) and `:value[not]`.')))
    expect(source.metadata).toMatchObject({ code: 'rc-demo', order: 1, tags: [], aliases: [] })
    expect(source.bodyLine).toBe(11)
    expect(source.circuit).toMatchObject({ kind: 'circuit', line: 13 })
    expect(source.calculator).toMatchObject({ kind: 'calculator', line: 25 })
    expect(source.limits).toBeNull()
    expect(source.values).toEqual([{ name: 'f_c', line: 11, column: 4 }])
    expect(source.links).toEqual([{ code: 'lp1-inv', revision: 3, line: 11, column: 25 }])
  })

  it('reads lines that end as on any machine, and past a byte order mark', () => {
    for (const ending of ['\n', '\r\n', '\r'])
      expect(readPage('\ufeff' + page('x').replaceAll('\n', ending)).ok).toBe(true)
  })

  it('comes back from what it is written to', () => {
    const source = valueOf(readPage(page('Notes: a "b" #c')))
    const again = valueOf(readPage(writePage(source.metadata, source.body)))
    expect(again.metadata).toEqual(source.metadata)
    expect(again.body).toBe(source.body)
  })

  it('passes over widgets shown inside other fences', () => {
    const shown = valueOf(readPage(page('````markdown', '```circuit', '```', ':value[x] [y](block:z)', '````')))
    expect(shown.values).toEqual([])
    expect(shown.links).toEqual([])
  })

  it.each<[string, string, number, number]>([
    ['no front matter', 'Notes', 1, 1],
    ['front matter without an end', '---\nformat: 1\n', 1, 1],
    ['a wrong format', page('x').replace('format: 1', 'format: 2'), 2, 9],
    ['a wrong code', page('x').replace('rc-demo', 'rc--demo'), 3, 7],
    ['a wrong function', page('x').replace('low-pass', 'sideways'), 5, 11],
    ['an unknown key', page('x').replace('owner: House', 'owner: House\ncolour: red'), 2, 1],
    ['a doubled key', page('x').replace('owner: House', 'owner: House\nowner: Other'), 9, 1],
    ['two circuits', page(...CIRCUIT), 23, 1],
    ['an open fence', [...FRONT, ...CALCULATOR, '```circuit', 'input in 1,1', ''].join('\n'), 19, 1],
    ['no calculator', [...FRONT, ...CIRCUIT].join('\n'), 11, 1],
  ])('refuses %s at its line and column', (_, text, line, column) => {
    const reading = readPage(text)
    expect(placesOf(reading)).toContainEqual([line, column])
    for (const one of problemsOf(reading)) expect(one.detail).toMatch(/\.$/)
  })

  it('refuses a page that is too long in one sentence', () => {
    expect(problemsOf(readPage('x'.repeat(PAGE_MAX + 1)))).toHaveLength(1)
  })
})

describe('readBlock', () => {
  it('reads a page whose circuit and calculator compute', () => {
    expect(valueOf(readBlock(page('Now :value[f_c], :value[R1], :value[sourceOhm].'))).stage.parts).toHaveLength(2)
  })

  it.each<[string, string, number, number]>([
    ['an unknown formula', page('x', 'a :formula[f_d]'), 12, 3],
    ['a formula of a part', page('x', ':formula[R1]'), 12, 1],
    ['a response that is not there', page('x', ':formula[response]').replace(/response: .*\n/, ''), 12, 1],
    ['an unknown live value', page('x', 'a :value[f_d]'), 12, 3],
    ['an error in the circuit', page('x').replace('ground 7,6', 'ground 7,6 8'), 18, 12],
    ['a part without an entry', page('x').replace('  C1: { default: 10n }\n', ''), 26, 3],
    ['an unknown name in a formula', page('x').replace('1/(2*pi*R1*C1)', '1/(2*pi*R1*C9)'), 29, 30],
    ['a dimension that does not fit', page('x').replace('1/(2*pi*R1*C1)', '2*pi*R1*C1'), 29, 19],
    ['ohms added to farads', page('x').replace('1/(2*pi*R1*C1)', '1/(R1 + C1)'), 29, 27],
    ['YAML that cannot be read', page('x').replace('  R1: { default: 10k }', '  R1: { default: 10k'), 27, 1],
    ['an unknown figure', page('x').replace('half-power frequency', 'nice frequency'), 29, 66],
    ['a wrong default', page('x').replace('default: 10n', 'default: 10kHz'), 27, 18],
  ])('places %s in the page', (_, text, line, column) => {
    const reading = readBlock(text)
    expect(reading.ok).toBe(false)
    const lines = placesOf(reading)
    expect(lines.map(([at]) => at)).toContain(line)
    if (column > 1) expect(lines).toContainEqual([line, column])
  })

  it('takes names of every object as plain names', () => {
    for (const name of ['__proto__', 'constructor', 'toString', 'hasOwnProperty'])
      for (const text of [
        page(`:value[${name}]`),
        page('x').replace('  f_c:', `  ${name}:`),
        page('x').replace('  R1:', `  ${name}:`),
        page('x').replace('owner: House', `owner: House\n${name}: { polluted: 1 }`),
        page('x').replace('response:', `${name}: { polluted: 1 }\nresponse:`),
      ]) {
        const reading = readBlock(text)
        if (reading.ok) expect(reading.value.stage.results.map((one) => one.name)).toContain(name)
      }
    expect(({} as Record<string, unknown>)['polluted']).toBeUndefined()
  })
})

describe('readYaml', () => {
  it('tells where each value stands', () => {
    const { positionOf } = valueOf(readYaml('a: 1\nb:\n  - x\n  - { c: "d" }\n', 10))
    expect(positionOf(['a'])).toEqual({ line: 10, column: 4 })
    expect(positionOf(['b', 0])).toEqual({ line: 12, column: 5 })
    expect(positionOf(['b', 1, 'c'])).toEqual({ line: 13, column: 11 })
    expect(positionOf(['b', 1, 'missing'])).toEqual({ line: 13, column: 5 })
  })

  it('reads a tag that it does not know as plain text', () => {
    expect(valueOf(readYaml('a: !!js/function "x"')).value).toEqual({ a: 'x' })
  })

  it.each([
    [
      'aliases by the thousand',
      `a: &a [x]\n${Array.from({ length: 9 }, (_, k) => `b${k}: &b${k} [${`*${k ? `b${k - 1}` : 'a'}, `.repeat(9)}x]`).join('\n')}`,
    ],
    ['deep brackets', '['.repeat(50_000)],
    ['deep braces', '{a: '.repeat(20_000)],
    ['deep lists', '- '.repeat(30_000) + 'x'],
    ['a long text', 'x'.repeat(70_000)],
    ['deep indentation', Array.from({ length: 300 }, (_, k) => `${' '.repeat(k)}a:`).join('\n')],
    ['doubled keys', 'a: 1\na: 2'],
    ['a tab', 'a:\n\t- b'],
  ])('refuses %s in a sentence, at once', (_, text) => {
    const from = performance.now()
    const reading = readYaml(text)
    expect(performance.now() - from).toBeLessThan(1000)
    expect(reading.ok).toBe(false)
    for (const one of problemsOf(reading)) expect(one.detail).toMatch(/\.$/)
  })
})
