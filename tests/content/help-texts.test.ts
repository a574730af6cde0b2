import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { CONDITION_NAMES } from '#shared/contracts/conditions'
import { ComputeAnswer, ComputeRequest } from '#shared/contracts/compute'
import { CalculatorSource, PartEntry, RecipeStep, Requirement, ResultEntry } from '#shared/contracts/calculator'
import { FrontMatter } from '#shared/contracts/front-matter'
import { SaveSizing } from '#shared/contracts/sizings'
import { CONSTANTS, FUNCTIONS, OPAMP_DATA } from '#shared/formula/vocabulary'
import { readCircuit } from '#shared/circuit/grammar/read-circuit'
import { readBlock } from '#shared/page-source/read-block'
import { valueOf } from '#shared/problems'
import { FIGURE_WORDS, readFigure } from '#shared/stage/figure'
import { defaultValues, selfCheck } from '#shared/stage/index'

const format = readFileSync('content-docs/block-format.md', 'utf8')
const computing = readFileSync('content-docs/computing.md', 'utf8')
const namesIn = (text: string) => new Set([...text.matchAll(/`([^`\n]+)`/g)].map((match) => match[1]!))

describe('the page on the block format', () => {
  const page = /````markdown\n([\s\S]*?)````/.exec(format)![1]!
  const named = namesIn(format)
  const mentioned = (name: string) => [...named].some((one) => one.split(/[^\p{L}\p{N}_]+/u).includes(name))

  it('ends with a page that reads and agrees with its circuit', () => {
    const { stage } = valueOf(readBlock(page))
    const check = selfCheck(stage, defaultValues(stage))
    expect(check.lines.map((line) => [line.subject, line.outcome])).toEqual([
      ['response', 'agrees'],
      ['f_c', 'agrees'],
      ['t_r', 'not checked'],
    ])
  })

  it.each([
    ['front matter', Object.keys(FrontMatter.shape)],
    ['the calculator', Object.keys(CalculatorSource.shape)],
    ['a part', Object.keys(PartEntry.shape)],
    ['a result', Object.keys(ResultEntry.shape)],
    ['a step', Object.keys(RecipeStep.shape)],
    ['a requirement', Object.keys(Requirement.shape)],
    ['the formula language', [...Object.keys(FUNCTIONS), ...Object.keys(CONSTANTS), ...Object.keys(OPAMP_DATA)]],
    ['the conditions', CONDITION_NAMES],
    [
      'the circuit',
      ['format', 'grid', 'input', 'output', 'R', 'C', 'L', 'opamp', 'wire', 'ground', 'reference', 'supply', 'name'],
    ],
  ])('names every word of %s', (_, words) => {
    const headings = format
      .split('\n')
      .filter((line) => line.startsWith('#'))
      .join(' ')
    expect(words.filter((word) => !mentioned(word) && !headings.includes(word))).toEqual([])
  })

  it('names every figure that a result may be', () => {
    const kinds = FIGURE_WORDS.map((words) =>
      words.replace(/^(lower|upper) /, '').replace(/ (at|of pair|0\.5) .*$/, ''),
    )
    expect(kinds.filter((kind) => !format.includes(kind))).toEqual([])
    const examples = [...named].filter((one) =>
      /^(gain at|ripple edge|peak|notch|natural|quality|half-power)/.test(one),
    )
    expect(examples.length).toBeGreaterThan(8)
    for (const one of examples)
      expect(
        readFigure(one, (name) => name === 'f_0'),
        one,
      ).toMatchObject({ ok: true })
  })

  it('shows circuit statements that read', () => {
    const statements = [...named].filter((one) =>
      /^(format|grid|input|output|R|opamp|wire|ground|reference|supply|name) (?!impedance)\S/.test(one),
    )
    expect(statements.length).toBeGreaterThanOrEqual(13)
    // Alone they touch nothing; what is looked for is that no word of them is refused.
    for (const one of statements) {
      const reading = readCircuit(one)
      const details = reading.ok ? [] : reading.problems.map((problem) => problem.detail)
      const refused = details.filter((detail) => !/touches nothing|has no (input|output)/.test(detail))
      expect(refused, one).toEqual([])
    }
  })
})

describe('the page on computing', () => {
  it('sends bodies that the addresses take', () => {
    const bodies = [...computing.matchAll(/--data '([^']*)'/g)].map((match) => JSON.parse(match[1]!) as object)
    const [, compute, save] = bodies
    expect(ComputeRequest.safeParse(compute).success).toBe(true)
    expect(SaveSizing.safeParse(save).success).toBe(true)
  })

  it('names every key of the request and the answer', () => {
    const named = namesIn(computing)
    for (const key of [...Object.keys(ComputeRequest.shape), ...Object.keys(SaveSizing.shape)])
      expect(named).toContain(key)
    const told = Object.keys(ComputeAnswer.shape).filter((key) => key !== 'setsTried')
    for (const key of told) expect(named).toContain(key)
  })

  it('shows a problem document that is JSON', () => {
    const [, text] = /```json\n([\s\S]*?)```/.exec(computing)!
    expect(JSON.parse(text!)).toMatchObject({ status: 422, errors: [{ pointer: '#/values/Rf' }] })
  })
})
