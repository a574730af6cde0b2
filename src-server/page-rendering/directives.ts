import type { MarkdownIt } from 'markdown-it'

const DIRECTIVE = /^:(value|formula)\[([A-Za-z\u0370-\u03ff][A-Za-z0-9_ \u0370-\u03ff]{0,39})\]/

/** Text up to the next character that a rule may begin with. */
const PLAIN = /[^\n!#$%&*+\-:<=>@[\\\]^_`{}~]+/y

/** `:value[f_c]`, a live number in the prose, and `:formula[f_c]`, the formula that computes it. */
export function directives(markdown: MarkdownIt) {
  markdown.inline.ruler.before('emphasis', 'directive', (state, silent) => {
    if (state.src[state.pos] !== ':') return false
    const match = DIRECTIVE.exec(state.src.slice(state.pos, state.pos + 60))
    if (!match) return false
    if (!silent) {
      const token = state.push('directive', 'span', 0)
      token.info = match[1]!
      token.content = match[2]!
    }
    state.pos += match[0].length
    return true
  })
  // A colon ends plain text, so that the rule is asked.
  markdown.inline.ruler.before('text', 'directive_text', (state, silent) => {
    PLAIN.lastIndex = state.pos
    const plain = PLAIN.exec(state.src)?.[0]
    if (!plain) return false
    if (!silent) state.pending += plain
    state.pos += plain.length
    return true
  })
  markdown.inline.ruler.disable('text')
  markdown.renderer.rules['directive'] = (tokens, index) => {
    const { info, content } = tokens[index]!
    const name = markdown.utils.escapeHtml(content)
    return `<span data-widget="${info}" data-name="${name}">${name}</span>`
  }
}
