import { describe, expect, it } from 'vitest'
import { isSingleKey, SHORTCUTS, shownKey } from '../../../src/composables/shortcuts'

describe('the table of keys', () => {
  it('gives each key one meaning in one place', () => {
    const taken = SHORTCUTS.flatMap(({ keys, where }) => keys.map((key) => `${key} ${where}`))
    expect(new Set(taken).size).toBe(taken.length)
  })

  it('has a second way for every single key that acts everywhere but the list itself', () => {
    const single = SHORTCUTS.filter(({ id, keys }) => id !== 'keys' && keys.every(isSingleKey))
    expect(single).toEqual([])
  })

  it.each([
    ['ArrowUp', '↑'],
    ['Ctrl+K', 'Ctrl K'],
    ['/', '/'],
  ])('shows %s as %s', (key, shown) => expect(shownKey(key)).toBe(shown))
})
