import { describe, expect, it } from 'vitest'
import { ownPath } from '../../../src/router/own-path'

describe('the page to go on to after sign-in', () => {
  it.each(['/', '/blocks/lp1-inv', '/blocks/lp1-inv?Rf=44k2&f_c=2.4k#when-to-use-it', '/?search=low%20pass', '/s/12'])(
    'takes the own path %s',
    (path) => expect(ownPath(path)).toBe(path),
  )

  // Forms that browsers read as another origin (WHATWG URL standard: backslash as slash, tab and line ends stripped).
  it.each([
    '//evil.example/',
    '/\\evil.example/',
    '/\t/evil.example/',
    '/\n/evil.example',
    '/a\\b',
    'https://evil.example/',
    'javascript:alert(1)',
    'blocks/lp1-inv',
    '',
    ' /blocks',
    '/\u0000/x',
    `/${'a'.repeat(2001)}`,
    undefined,
    null,
    ['/blocks', '/sizings'],
  ])('goes to the shelf instead of %j', (asked) => expect(ownPath(asked)).toBe('/'))

  it.each(['/sign-in', '/sign-in?next=/sizings', '/sign-in/'])('does not come back to sign-in for %s', (path) =>
    expect(ownPath(path)).toBe('/'),
  )

  it('stays on its origin for every path it lets through', () => {
    const signs = ['/', '\\', '.', ':', '@', 'a', '?', '#', '\t', '\n', '%2f']
    for (const first of signs)
      for (const second of signs)
        for (const third of signs) {
          const path = ownPath(`/${first}${second}${third}evil.example`)
          expect(new URL(path, 'https://shelf.example').origin).toBe('https://shelf.example')
        }
  })
})
