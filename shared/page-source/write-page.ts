import { stringify } from 'yaml'
import type { FrontMatter } from '../contracts/front-matter'

/** A whole page from metadata and notes, as a file holds it. */
export function writePage(metadata: FrontMatter, body: string): string {
  return `---\n${stringify(metadata, { lineWidth: 0 })}---\n${body}`
}
