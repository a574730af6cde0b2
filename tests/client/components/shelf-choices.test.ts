import { describe, expect, it } from 'vitest'
import { choicesOf, sentenceOf } from '../../../src/components/shelf/choices'

describe('choices in the address of the shelf', () => {
  it('are read as stated', () =>
    expect(choicesOf({ search: ' anti alias ', function: 'low-pass', order: '2', status: 'in review' })).toEqual({
      search: 'anti alias',
      function: 'low-pass',
      order: 2,
      status: 'in review',
    }))

  it('are left out where they state nothing that can be chosen', () =>
    expect(choicesOf({ function: 'comb', order: 'two', status: 'secret', limit: '1', x: 'y', search: '' })).toEqual({}))

  it('take the search even when another choice is wrong', () =>
    expect(choicesOf({ search: 'rauch', order: '-1' })).toEqual({ search: 'rauch' }))
})

describe('the sentence above the rows', () => {
  it.each([
    [6, {}, '6 blocks on the shelf'],
    [1, { function: 'low-pass', topology: 'inverting' }, '1 inverting low-pass block on the shelf'],
    [0, { search: 'lpx' }, 'No blocks for “lpx”'],
    [2, { order: 2, status: 'in review' }, '2 blocks of order 2 in review on the shelf'],
  ] as const)('for %i and %j', (total, choices, sentence) => expect(sentenceOf(total, choices)).toBe(sentence))
})
