import MarkdownIt from 'markdown-it'
import { ProblemError } from '#shared/problems'
import { directives } from './directives'
import { mathRules } from './math'
import { headingIds, type Heading } from './headings'
import { linkRules } from './links'

export interface RenderedMarkdown {
  html: string
  contents: Heading[]
}

const NESTING_MAX = 30
/** Pieces of a page; a page of this size is rendered in well under half a second. */
const TOKENS_MAX = 12_000
/** Lines of a page; most of them would be pieces. */
const LINES_MAX = 6000
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

/**
 * Markdown to HTML that has yet to be sanitised, with the headings found.
 * @throws {ProblemError} 'page-not-read' when the notes hold too many pieces
 */
export function renderMarkdown(body: string): RenderedMarkdown {
  if (body.split(/\r\n?|\n/, LINES_MAX + 1).length > LINES_MAX)
    throw new ProblemError('page-not-read', `These notes have more than ${LINES_MAX} lines; split the page.`)
  const environment: { headings: Heading[] } = { headings: [] }
  const tokens = markdown.parse(body, environment)
  const count = tokens.reduce((sum, token) => sum + 1 + (token.children?.length ?? 0), 0)
  if (count > TOKENS_MAX)
    throw new ProblemError('page-not-read', 'These notes hold too many pieces (cells, links, items); split the page.')
  return { html: markdown.renderer.render(tokens, markdown.options, environment), contents: environment.headings }
}
