import katex from 'katex'
import 'katex/dist/katex.min.css'

/** Sets a formula into an element as nodes; TeX that cannot be set shows its text in place. */
export function typeset(place: HTMLElement, tex: string, display: boolean) {
  katex.render(tex, place, {
    displayMode: display,
    throwOnError: false,
    trust: false,
    strict: 'ignore',
    maxExpand: 1000,
    maxSize: 20,
    output: 'htmlAndMathml',
  })
  // The TeX source would be read aloud as text after the formula (it stays out of the accessibility tree this way).
  for (const annotation of place.querySelectorAll('annotation')) annotation.remove()
}
