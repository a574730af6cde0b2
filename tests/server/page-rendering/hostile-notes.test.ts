import { JSDOM } from 'jsdom'
import { describe, expect, it } from 'vitest'
import { SAFE_HTML } from '#shared/page-source/safe-html'
import { pageRenderer } from '../../../src-server/page-rendering'
import { HOSTILE_NOTES } from '../../support/hostile-notes'

const render = pageRenderer()

const WIDGETS = ['circuit', 'calculator', 'limits', 'tex', 'value', 'formula']
const ADDRESS = /^(?:https?:\/\/|mailto:|#|\/(?![/\\]))/i

/** What a page may not hold, in words; empty when it is clean. */
function faultsOf(html: string): string[] {
  const faults: string[] = []
  const { document } = new JSDOM(`<!doctype html><body>${html}`, { runScripts: undefined }).window
  for (const element of document.body.querySelectorAll('*')) {
    const tag = element.tagName.toLowerCase()
    if (!SAFE_HTML.ALLOWED_TAGS.includes(tag)) faults.push(`element ${tag}`)
    for (const { name, value } of element.attributes) {
      if (!SAFE_HTML.ALLOWED_ATTR.includes(name)) faults.push(`attribute ${name}`)
      if ((name === 'href' || name === 'src') && !ADDRESS.test(value)) faults.push(`address ${value}`)
      if (name === 'src' && !/^\/uploads\/[a-z0-9-]+$/i.test(value)) faults.push(`image ${value}`)
      if (name === 'id' && !/^n-[a-z0-9-]+$/.test(value)) faults.push(`id ${value}`)
      if (name === 'data-widget' && !WIDGETS.includes(value)) faults.push(`widget ${value}`)
      if (name === 'href' && /^https?:/i.test(value) && element.getAttribute('rel') !== 'noopener noreferrer')
        faults.push(`link without rel ${value}`)
    }
  }
  return faults
}

describe('hostile notes', () => {
  it('are at least sixty', () => expect(HOSTILE_NOTES.length).toBeGreaterThanOrEqual(60))

  it.each(HOSTILE_NOTES.map((note) => [note]))('come out as text: %j', (note) => {
    expect(faultsOf(render(note).html)).toEqual([])
  })

  it('come out as text in the middle of a page too', () => {
    const { html } = render(HOSTILE_NOTES.map((note) => `A line.\n\n${note}\n\n- ${note}\n`).join('\n'))
    expect(faultsOf(html)).toEqual([])
  })

  it('put nothing into the headings list but an own id and plain text', () => {
    for (const { id, level } of render(HOSTILE_NOTES.join('\n\n')).contents) {
      expect(id).toMatch(/^n-[a-z0-9-]+$/)
      expect(level).toBeGreaterThanOrEqual(2)
    }
  })

  it('never show what they were: the text is still there to read', () => {
    expect(render('<script>alert(1)</script>').html).toContain('&lt;script&gt;alert(1)&lt;/script&gt;')
    expect(render('[x](javascript:alert(1))').html).toContain('[x](javascript:alert(1))')
  })
})

describe('large notes', () => {
  /** Milliseconds until the notes are rendered, or refused in words. */
  const timed = (text: string) => {
    const from = performance.now()
    try {
      render(text)
    } catch (error) {
      expect(error).toMatchObject({ code: 'page-not-read', detail: expect.stringMatching(/^These notes .*\.$/) })
    }
    return performance.now() - from
  }
  // A page holds 256 kB. The bound leaves room for a busy machine; what it catches is growth by the square.
  it.each([
    ['nested quotes', '>'.repeat(100_000)],
    ['nested brackets', '['.repeat(100_000)],
    ['nested lists', Array.from({ length: 400 }, (_, k) => `${' '.repeat(k)}- x`).join('\n')],
    ['stars', '*a **b '.repeat(30_000)],
    ['dollars', '$a '.repeat(80_000)],
    ['dollars by twos', '$$\n'.repeat(80_000)],
    ['formulas that never end', '$$a\n'.repeat(5_900)],
    ['formulas with escapes', '$a\\$'.repeat(60_000)],
    ['colons', ':value['.repeat(36_000)],
    ['commas', 'a, b; c. '.repeat(28_000)],
    ['line breaks in one paragraph', 'a b\n'.repeat(60_000)],
    ['backquotes', '`'.repeat(1000) + ' a'.repeat(100_000)],
    ['backquotes of growing length', Array.from({ length: 600 }, (_, k) => '`'.repeat(k)).join(' ')],
    ['brackets and brackets', '[a](b'.repeat(50_000)],
    ['references', '[a]: /b\n'.repeat(30_000)],
    ['one table', `|${'a|'.repeat(50)}\n|${'-|'.repeat(50)}\n` + `|${'b|'.repeat(50)}\n`.repeat(2400)],
    ['equal headings', '# a\n'.repeat(5_900)],
    ['more headings', '# a\n'.repeat(60_000)],
    ['equal headings that look numbered', '# a\n# a 2\n# a 3\n'.repeat(1_900)],
    ['fences', '```\n'.repeat(60_000)],
    ['entities', '&lt;'.repeat(60_000)],
  ])('of %s are rendered or refused in time', (_, text) => expect(timed(text)).toBeLessThan(5000), 30_000)

  it('give equal headings ids of their own', () => {
    const { contents } = render('# a\n# a\n# a 2\n# a\n# a-2')
    expect(contents.map((one) => one.id)).toEqual(['n-a', 'n-a-2', 'n-a-2-2', 'n-a-3', 'n-a-2-3'])
  })
})
