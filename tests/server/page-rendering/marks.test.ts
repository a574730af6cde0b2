import { describe, expect, it } from 'vitest'
import { pageRenderer } from '../../../src-server/page-rendering'

const render = pageRenderer()
const html = (text: string) => render(text).html.trim()

describe('notes', () => {
  it.each([
    [':value[f_c]', '<p><span data-widget="value" data-name="f_c">f_c</span></p>'],
    ['at :value[f_c], not', '<p>at <span data-widget="value" data-name="f_c">f_c</span>, not</p>'],
    [':formula[response]', '<p><span data-widget="formula" data-name="response">response</span></p>'],
    ['`:value[f_c]`', '<p><code>:value[f_c]</code></p>'],
    ['a:value[]', '<p>a:value[]</p>'],
    ['ratio 1:2', '<p>ratio 1:2</p>'],
    ['$R_i < 2$', '<p><span data-widget="tex" data-tex="R_i &lt; 2"></span></p>'],
    ['$\\text{a\\$b}$', '<p><span data-widget="tex" data-tex="\\text{a\\$b}"></span></p>'],
    ['$$\\frac12$$', '<div data-widget="tex" data-tex="\\frac12" data-display="block"></div>'],
    ['$$\nx\n$$', '<div data-widget="tex" data-tex="x" data-display="block"></div>'],
    ['it costs $5 or $6', '<p>it costs $5 or $6</p>'],
    ['between $ 5 and 6 $', '<p>between $ 5 and 6 $</p>'],
    ['$x$2', '<p>$x$2</p>'],
    ['\\$x\\$', '<p>$x$</p>'],
  ])('%j gives %s', (text, wanted) => {
    // Browsers and jsdom write < in an attribute either way.
    expect(html(text).replaceAll('R_i < 2', 'R_i &lt; 2')).toBe(wanted)
  })

  it.each([
    ['[x](block:lp2-mfb)', '/blocks/lp2-mfb'],
    ['[x](block:LP2-MFB)', '/blocks/lp2-mfb'],
    ['[x](block:lp2-mfb@3)', '/blocks/lp2-mfb/revisions/3'],
    ['[x](/help/block-format)', '/help/block-format'],
    ['[x](#n-parts)', '#n-parts'],
    ['[x](mailto:house@poleshelf.example)', 'mailto:house@poleshelf.example'],
  ])('link %s to %s', (text, address) => expect(html(text)).toContain(`href="${address}"`))

  it('tell the block of a link, and shield the page from outside ones', () => {
    expect(html('[x](block:lp2-mfb@3)')).toContain('data-block="lp2-mfb"')
    expect(html('[x](https://iec.example/a)')).toContain('rel="noopener noreferrer"')
    expect(html('[x](block:lp2-mfb)')).not.toContain('rel=')
  })

  it('show uploads and the words of other images', () => {
    expect(html('![a plot](/uploads/abc-1)')).toBe('<p><img src="/uploads/abc-1" alt="a plot" loading="lazy"></p>')
    expect(html('![a plot](https://elsewhere.example/a.png)')).toBe('<p>a plot</p>')
  })

  it('leave places for widgets and show other fences as code', () => {
    expect(html('```circuit\ninput in 1,1\n```')).toBe('<div data-widget="circuit"></div>')
    expect(html('```calculator\nparts: {}\n```')).toBe('<div data-widget="calculator"></div>')
    expect(html('```spice\n.end\n```')).toBe('<pre tabindex="0"><code>.end\n</code></pre>')
    expect(html('````markdown\n```circuit\n```\n````')).toBe('<pre tabindex="0"><code>```circuit\n```\n</code></pre>')
  })

  it('list their headings from the second level on, with prefixed ids', () => {
    const { contents } = render('# Été & $x$\n\n### Parts\n\n# location')
    expect(contents).toEqual([
      { id: 'n-e-te', text: 'Été & ', level: 2 },
      { id: 'n-parts', text: 'Parts', level: 3 },
      { id: 'n-location', text: 'location', level: 2 },
    ])
  })

  it('come out the same for every window that sanitises them', () => {
    const first = html('a *b* :value[K]')
    for (let k = 0; k < 250; k++) render(`page ${k}`)
    expect(pageRenderer()('a *b* :value[K]').html.trim()).toBe(first)
  })
})
