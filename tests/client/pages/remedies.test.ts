import { expect, it } from 'vitest'
import { PROBLEM_TITLES } from '#shared/problems'
import { REMEDIES } from '../../../src/pages/problem/remedies'

it.each(Object.keys(PROBLEM_TITLES))('says what to do about %s in whole sentences', (code) => {
  expect(REMEDIES[code as keyof typeof REMEDIES]).toMatch(/^[A-ZI].{20,}[.]$/s)
})
