import { readdirSync, readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readBlock, type Block } from '#shared/page-source/read-block'
import { valueOf } from '#shared/problems'
import { defaultValues, evaluateStage, nothingAsked, selfCheck } from '#shared/stage/index'

const files = readdirSync('content-seed').filter((file) => file.endsWith('.md'))
const blocks = new Map<string, Block>(
  files.map((file) => [file.replace(/\.md$/, ''), valueOf(readBlock(readFileSync(`content-seed/${file}`, 'utf8')))]),
)

const HEADINGS = [
  'When to use it',
  'Circuit and transfer function',
  'Sizing, step by step',
  'Valid range',
  'What the amplifier must do',
  'Parts',
  'Layout and test',
  'Cautions',
  'References',
]

it('holds the six first blocks', () => {
  expect([...blocks.keys()]).toEqual(
    expect.arrayContaining(['lp1-inv', 'hp1-inv', 'bp1-wide', 'lp1-ni', 'lp2-sku', 'lp2-mfb']),
  )
})

describe.each([...blocks])('the house block %s', (code, { page, stage }) => {
  const notes = page.body.replace(/^```[^\n]*\n[\s\S]*?^```$/gm, '')

  it('carries the code of its file', () => expect(page.metadata.code).toBe(code))

  it('agrees with its own circuit, response and every result', () => {
    const check = selfCheck(stage, defaultValues(stage))
    expect(check.lines.filter((line) => line.outcome !== 'agrees')).toEqual([])
    expect(check.outcome).toBe('agrees')
  })

  it('opens on values in stock, inside its limits', () => {
    const outcome = evaluateStage(stage, nothingAsked(stage))
    expect(Object.entries(outcome.parts).filter(([, part]) => !part.inStock)).toEqual([])
    expect(outcome.limits.filter((limit) => limit.level !== 'note')).toEqual([])
  })

  // Half a step of E96, 1.2 %, is what one resistor alone can leave. Source: IEC 60063:2015.
  it('meets its own targets from stock', () => {
    const targets = Object.fromEntries(stage.recipe!.targets)
    const outcome = evaluateStage(stage, { ...nothingAsked(stage), targets })
    for (const name of Object.keys(targets)) expect(Math.abs(outcome.results[name]!.relativeError!)).toBeLessThan(0.012)
    expect(outcome.infeasible).toEqual([])
  })

  it('prints only formulas that compute', () => {
    for (const [, name] of notes.matchAll(/:formula\[([^\]]*)\]/g))
      expect(
        name === 'response' ? stage.responses.length : stage.results.some((one) => one.name === name && one.formula),
      ).toBeTruthy()
  })

  it('links to blocks of the house', () => {
    expect(page.links.length).toBeGreaterThan(0)
    for (const link of page.links) expect([...blocks.keys()]).toContain(link.code)
  })

  it('follows the house template in 400 to 900 words', () => {
    expect([...page.body.matchAll(/^## (.*)$/gm)].map((match) => match[1])).toEqual(HEADINGS)
    const words = notes.split(/\s+/).filter(Boolean).length
    expect(words).toBeGreaterThanOrEqual(400)
    expect(words).toBeLessThanOrEqual(900)
  })
})
