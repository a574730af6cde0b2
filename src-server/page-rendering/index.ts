import { createHash } from 'node:crypto'
import type { Heading } from './headings'
import { renderMarkdown } from './markdown'
import { sanitise } from './sanitise'

export interface RenderedPage {
  /** Safe HTML with places for widgets. */
  html: string
  contents: Heading[]
}

const KEPT_MAX = 200

/** Renders notes to safe HTML; a page rendered before is kept by its hash. */
export function pageRenderer() {
  const kept = new Map<string, RenderedPage>()
  return (body: string): RenderedPage => {
    const hash = createHash('sha256').update(body).digest('hex')
    const found = kept.get(hash)
    if (found) return found
    const { html, contents } = renderMarkdown(body)
    const page = { html: sanitise(html), contents }
    if (kept.size >= KEPT_MAX) kept.delete(kept.keys().next().value!)
    kept.set(hash, page)
    return page
  }
}
export type PageRenderer = ReturnType<typeof pageRenderer>
