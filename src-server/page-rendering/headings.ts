import type { MarkdownIt } from 'markdown-it'

export interface Heading {
  id: string
  text: string
  level: number
}

/**
 * Headings get ids with a prefix, so that no name in the notes can stand for an object of the page, and start at level
 * 2: level 1 is the block's title.
 */
export function headingIds(markdown: MarkdownIt) {
  markdown.core.ruler.push('heading_ids', (state) => {
    const headings = (state.env as { headings?: Heading[] }).headings ?? []
    const used = new Map<string, number>()
    state.tokens.forEach((token, index) => {
      if (token.type !== 'heading_open' && token.type !== 'heading_close') return
      const level = Math.min(6, Math.max(2, Number(token.tag.slice(1))))
      token.tag = `h${level}`
      if (token.type === 'heading_close') return
      const text = textOf(state.tokens[index + 1]?.children ?? [])
      const id = unusedId(text, used)
      token.attrSet('id', id)
      headings.push({ id, text, level })
    })
  })
}

const textOf = (tokens: { type: string; content: string }[]) =>
  tokens
    .map((token) => (token.type === 'text' || token.type === 'code_inline' ? token.content : ''))
    .join('')
    .slice(0, 120)

/** An id that no heading before has; equal words are numbered on from the last, not counted through each time. */
function unusedId(text: string, used: Map<string, number>): string {
  const words = text
    .toLowerCase()
    .normalize('NFKD')
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-+|-+$/g, '')
  const base = `n-${words || 'section'}`
  let id = base
  for (let k = (used.get(base) ?? 0) + 1; used.has(id); k++) {
    id = `${base}-${k + 1}`
    used.set(base, k)
  }
  used.set(id, 0)
  return id
}
