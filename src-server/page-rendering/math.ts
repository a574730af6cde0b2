import type { MarkdownIt } from 'markdown-it'

/** Lines of one displayed formula; further on nobody looks for its end. */
const LINES_MAX = 100

/**
 * `$…$` in a line and `$$…$$` in lines of their own. A dollar with a space inside it, or one before a digit at the
 * end, is money and stays text.
 */
export function mathRules(markdown: MarkdownIt) {
  const place = (tex: string, display: boolean) =>
    `<${display ? 'div' : 'span'} data-widget="tex" data-tex="${markdown.utils.escapeHtml(tex)}"${display ? ' data-display="block"' : ''}></${display ? 'div' : 'span'}>`

  markdown.inline.ruler.after('escape', 'math', (state, silent) => {
    const { src, pos } = state
    if (src[pos] !== '$' || src[pos + 1] === '$' || /\s/.test(src[pos + 1] ?? ' ')) return false
    let end = pos + 1
    while ((end = src.indexOf('$', end)) !== -1 && src[end - 1] === '\\') end++
    if (end === -1 || end === pos + 1 || /\s/.test(src[end - 1]!) || /\d/.test(src[end + 1] ?? '')) return false
    if (!silent) state.push('math', 'span', 0).content = src.slice(pos + 1, end)
    state.pos = end + 1
    return true
  })

  markdown.block.ruler.after(
    'blockquote',
    'math_block',
    (state, startLine, endLine, silent) => {
      const line = (n: number) => state.src.slice(state.bMarks[n]! + state.tShift[n]!, state.eMarks[n]!)
      const first = line(startLine)
      if (!first.startsWith('$$')) return false
      const oneLine = first.length > 4 && first.trimEnd().endsWith('$$')
      let end = startLine
      const last = Math.min(endLine, startLine + LINES_MAX)
      if (!oneLine) {
        do end++
        while (end < last && !line(end).trimEnd().endsWith('$$'))
        if (end >= last) return false
      }
      if (silent) return true
      const text = Array.from({ length: end - startLine + 1 }, (_, k) => line(startLine + k)).join('\n')
      const token = state.push('math_block', 'div', 0)
      token.content = text.trim().slice(2, -2).trim()
      token.map = [startLine, end + 1]
      state.line = end + 1
      return true
    },
    { alt: ['paragraph', 'reference', 'blockquote', 'list'] },
  )

  markdown.renderer.rules['math'] = (tokens, index) => place(tokens[index]!.content, false)
  markdown.renderer.rules['math_block'] = (tokens, index) => `${place(tokens[index]!.content, true)}\n`
}
