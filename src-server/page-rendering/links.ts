import type { MarkdownIt } from 'markdown-it'

const BLOCK = /^block:([a-z0-9]+(?:-[a-z0-9]+)*)(?:@(\d{1,7}))?$/i
const OUTSIDE = /^(?:https?:\/\/|mailto:)/i
/** An own path: one slash and no second one, no backslash, no control letter. */
const OWN = /^(?:#[\w-]*|\/(?![/\\])[^\\\p{Cc}]*)$/u
const UPLOAD = /^\/uploads\/[a-z0-9-]{1,80}$/i

/** Address of a `block:` link; null when it is none. */
export function blockAddress(href: string): { code: string; path: string } | null {
  const match = BLOCK.exec(href)
  if (!match) return null
  const code = match[1]!.toLowerCase()
  return { code, path: match[2] ? `/blocks/${code}/revisions/${match[2]}` : `/blocks/${code}` }
}

/** Only http, https, mailto, `block:` and own paths are links; images only own uploads. The rest stays text. */
export function linkRules(markdown: MarkdownIt) {
  markdown.validateLink = (address) => {
    const plain = address.trim()
    return BLOCK.test(plain) || OUTSIDE.test(plain) || OWN.test(plain)
  }
  const render: NonNullable<typeof markdown.renderer.rules.link_open> = (tokens, index, options, _env, self) => {
    const token = tokens[index]!
    const href = String(token.attrGet('href') ?? '')
    const block = blockAddress(href)
    if (block) {
      token.attrSet('href', block.path)
      token.attrSet('data-block', block.code)
    } else if (OUTSIDE.test(href)) token.attrSet('rel', 'noopener noreferrer')
    return self.renderToken(tokens, index, options)
  }
  markdown.renderer.rules['link_open'] = render
  markdown.renderer.rules['image'] = (tokens, index) => {
    const token = tokens[index]!
    const source = String(token.attrGet('src') ?? '')
    const words = markdown.utils.escapeHtml(token.content)
    return UPLOAD.test(source)
      ? `<img src="${markdown.utils.escapeHtml(source)}" alt="${words}" loading="lazy">`
      : words
  }
}
