import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readBlock } from '#shared/page-source/read-block'

const page = readFileSync('content-seed/lp1-inv.md', 'utf8')
const withFormula = (formula: string) => page.replace('formula: 1/(2*pi*Rf*Cf)', () => `formula: "${formula}"`)
const withCircuit = (lines: string[]) => page.replace('name n 8,6', () => lines.join('\n'))
const many = (count: number, make: (k: number) => string) => Array.from({ length: count }, (_, k) => make(k))

describe('a page that asks for much work', () => {
  // The bound is 500 ms on an idle machine; it leaves room for a busy one.
  it.each<[string, string]>([
    ['a formula of 60 kB', withFormula('1+'.repeat(30_000) + '1')],
    ['parentheses by the thousand', withFormula('('.repeat(30_000) + '1' + ')'.repeat(30_000))],
    ['parentheses that open', withFormula('('.repeat(1900))],
    ['powers of powers', withFormula('9^9^9^9^9*Rf')],
    ['minus signs', withFormula('-'.repeat(1900) + 'Rf')],
    ['calls in calls', withFormula('sqrt('.repeat(380) + 'Rf' + ')'.repeat(380))],
    ['a call with many arguments', withFormula(`max(${'Rf,'.repeat(600)}Rf)`)],
    ['parts by the thousand', withCircuit(many(1900, (k) => `R R${k} ${k % 190},10 ${(k % 190) + 2},10`))],
    ['wires by the thousand', withCircuit(many(1900, (k) => `wire 0,${k % 200} 200,${k % 200}`))],
    ['one wire of many corners', withCircuit([`wire ${many(12_000, (k) => `${k % 2},${(k >> 1) & 1}`).join(' ')}`])],
    ['lines by the hundred thousand', withCircuit(many(200_000, () => '#'))],
    ['words of a statement', withCircuit([`wire ${'1,1 '.repeat(15_000)}`])],
    [
      'results by the thousand',
      page.replace('  Z_in:', () => `${many(1500, (k) => `  r${k}: { formula: Rf, meaning: m }`).join('\n')}\n  Z_in:`),
    ],
    [
      'results that need each other in a row',
      page.replace(
        '  Z_in:',
        () =>
          `${many(97, (k) => `  r${k}: { formula: ${k < 96 ? `r${k + 1}` : 'Rf'}, meaning: m }`).join('\n')}\n  Z_in:`,
      ),
    ],
    [
      'a ring of results',
      page.replace(
        '  Z_in:',
        () => `${many(97, (k) => `  r${k}: { formula: r${(k + 1) % 97}, meaning: m }`).join('\n')}\n  Z_in:`,
      ),
    ],
    ['live values by the thousand', page.replace('## Parts', () => `${':value[zz] '.repeat(15_000)}\n## Parts`)],
    ['open fences', `${page}\n${'```circuit\n'.repeat(10_000)}`],
    ['backquotes', `${page}\n${'`'.repeat(100_000)}`],
    ['open links', `${page}\n${'](block:'.repeat(20_000)}`],
  ])('is read or refused in time: %s', (_, text) => {
    const from = performance.now()
    const reading = readBlock(text)
    expect(performance.now() - from).toBeLessThan(2000)
    if (!reading.ok) for (const one of reading.problems.slice(0, 20)) expect(one.detail).toMatch(/[.?]$/)
  })
})
