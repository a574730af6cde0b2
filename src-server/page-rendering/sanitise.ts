import createDOMPurify, { type DOMPurify, type WindowLike } from 'dompurify'
import { JSDOM } from 'jsdom'
import { SAFE_HTML } from '#shared/page-source/safe-html'

/** A window grows with what went through it; it is made anew after this many pages. */
const PAGES_MAX = 200

let purifier: DOMPurify | null = null
let pages = 0
let dom: JSDOM | null = null

/** HTML with the tags and attributes of the closed list only. */
export function sanitise(html: string): string {
  if (!purifier || pages >= PAGES_MAX) {
    dom?.window.close()
    dom = new JSDOM('')
    purifier = createDOMPurify(dom.window as unknown as WindowLike)
    pages = 0
  }
  pages++
  return purifier.sanitize(html, { ...SAFE_HTML, RETURN_TRUSTED_TYPE: false })
}
