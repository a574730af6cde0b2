import { describe, expect, it } from 'vitest'
import { readBlock } from '#shared/page-source/read-block'
import { readPage } from '#shared/page-source/read-page'
import { readYaml } from '#shared/page-source/read-yaml'
import type { Problem } from '#shared/problems'
import { seedPage } from '../../support/stages'

const page = seedPage('lp1-inv')
const lineOf = (text: string, words: string) => text.split('\n').findIndex((line) => line.includes(words)) + 1
const problemsOf = (text: string): Problem[] => {
  const reading = readBlock(text)
  return reading.ok ? [] : reading.problems
}

describe('several problems of one page', () => {
  it('are told together, each on its line of the page', () => {
    const text = page
      .replace('default: 22.1k', 'default: 22.1 kHz')
      .replace('formula: -Rf/Ri, meaning', 'formula: -Rf/Rj, meaning')
      .replace('is: input impedance at 0 Hz', 'is: input impedance')
      .replace('response: -(Rf/Ri)', 'response: -(Rf/Ri')
      .replace('part: Ri, formula', 'part: Rx, formula')
      .replace('when: f_c > 300 kHz', 'when: f_c > 300 kΩ')
    const problems = problemsOf(text)
    const wanted = ['default: 22.1 kHz', '-Rf/Rj', 'is: input impedance', 'response:', 'part: Rx', '300 kΩ']
    expect(problems.map((one) => one.line)).toEqual(expect.arrayContaining(wanted.map((words) => lineOf(text, words))))
    for (const one of problems) {
      expect(one.detail).toMatch(/[.?]$/)
      expect(one.column).toBeGreaterThan(0)
    }
  })

  it('in the front matter are told together too', () => {
    const reading = readPage(page.replace('order: 1', 'order: one').replace('function: low-pass', 'function: 7'))
    expect(reading.ok).toBe(false)
    if (!reading.ok) expect(reading.problems).toHaveLength(2)
  })
})

describe('a page that is no page', () => {
  const inFrontMatter = (yaml: string) => page.replace('owner: Ines Marlow', () => yaml)
  const inCalculator = (yaml: string) => page.replace('limits:', () => `${yaml}\nlimits:`)
  const laughs = Array.from({ length: 12 }, (_, k) => `l${k}: &l${k} [${k ? `*l${k - 1},`.repeat(9) : 'x'}x]`).join(
    '\n',
  )

  it.each<[string, string]>([
    ['one megabyte of text', 'x'.repeat(1 << 20)],
    ['one megabyte after a page', page + 'y '.repeat(1 << 19)],
    ['one megabyte of lines', '\n'.repeat(1 << 20)],
    ['nothing', ''],
    ['a zero byte', '\0'],
    ['half a surrogate', '\ud800'],
    ['only hyphens', '---\n---\n'],
    ['laughs in the front matter', inFrontMatter(laughs)],
    ['laughs in the calculator', inCalculator(laughs)],
    ['a list of itself', inCalculator('x: &x [*x]')],
    ['a map merged into itself', inCalculator('x: &x { <<: *x }')],
    ['an alias of nothing', inCalculator('x: *nowhere')],
    ['a second document', inCalculator('---\nparts: {}')],
    ['a directive', inCalculator('%YAML 1.1')],
    ['a binary tag', inCalculator('x: !!binary "////"')],
    ['a key that is a map', inCalculator('? { a: b }\n: c')],
    ['a number beyond numbers', page.replace('order: 1', 'order: 1e999')],
    ['not a number', page.replace('order: 1', 'order: .nan')],
    ['a date for a title', page.replace(/title: .*/, 'title: 2020-01-01T00:00:00Z\nextra: !!timestamp 2020-01-01')],
    ['deep brackets in the calculator', inCalculator(`x: ${'['.repeat(2000)}`)],
    ['deep maps in the front matter', inFrontMatter(`x: ${'{a: '.repeat(2000)}`)],
  ])('is refused at once, in sentences: %s', (_, text) => {
    const from = performance.now()
    const problems = problemsOf(text)
    expect(performance.now() - from).toBeLessThan(1500)
    expect(problems.length).toBeGreaterThan(0)
    for (const one of problems) {
      expect(one.detail).toMatch(/[.?]$/)
      expect(one.detail.length).toBeLessThan(600)
      expect(one.line).toBeGreaterThan(0)
    }
  })
})

describe('quoted and folded values', () => {
  it('keep their place', () => {
    const reading = readYaml('a: >\n  folded\n  text\nb: "x"\nc:\n  - \'y\'\n')
    expect(reading.ok).toBe(true)
    if (!reading.ok) return
    expect(reading.value.positionOf(['b'])).toEqual({ line: 4, column: 5 })
    expect(reading.value.positionOf(['c', 0])).toEqual({ line: 6, column: 6 })
  })
})
