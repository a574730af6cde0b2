import MarkdownIt from 'markdown-it'
import { directives } from './directives'
import { mathRules } from './math'
import { headingIds, type Heading } from './headings'
import { linkRules } from './links'

export interface RenderedMarkdown {
  html: string
  contents: Heading[]
}

const NESTING_MAX = 30
const WIDGETS = ['circuit', 'calculator', 'limits']

/** CommonMark with the page's own marks. Raw HTML stays text; widgets become empty places that the client fills. */
const markdown = new MarkdownIt('commonmark', {
  html: false,
  linkify: false,
  typographer: false,
  maxNesting: NESTING_MAX,
})
  .enable(['table', 'strikethrough'])
  .use(linkRules)
  .use(mathRules)
  .use(directives)
  .use(headingIds)

markdown.renderer.rules['fence'] = (tokens, index) => {
  const { info, content } = tokens[index]!
  const kind = info.trim().split(/\s+/)[0] ?? ''
  if (WIDGETS.includes(kind)) return `<div data-widget="${kind}"></div>\n`
  return `<pre tabindex="0"><code>${markdown.utils.escapeHtml(content)}</code></pre>\n`
}

/** Markdown to HTML that has yet to be sanitised, with the headings found. */
export function renderMarkdown(body: string): RenderedMarkdown {
  const environment: { headings: Heading[] } = { headings: [] }
  const html = markdown.render(body, environment)
  return { html, contents: environment.headings }
}
