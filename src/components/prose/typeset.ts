import katex from 'katex'
import 'katex/dist/katex.min.css'

/** Levels of elements in a formula; some thousands of them take the browser's layout down. */
const LEVELS_MAX = 400

/** Sets a formula into an element as nodes; TeX that cannot be set shows its text in place. */
export function typeset(place: HTMLElement, tex: string, display: boolean) {
  const formula = document.createElement('span')
  try {
    katex.render(tex, formula, {
      displayMode: display,
      throwOnError: false,
      trust: false,
      strict: 'ignore',
      maxExpand: 1000,
      maxSize: 20,
      output: 'htmlAndMathml',
    })
  } catch {
    // Beyond what KaTeX itself reports: nested so deep that it runs out of stack.
    return showText(place, tex)
  }
  if (isTooDeep(formula)) return showText(place, tex)
  // The TeX source would be read aloud as text after the formula (it stays out of the accessibility tree this way).
  for (const annotation of formula.querySelectorAll('annotation')) annotation.remove()
  place.replaceChildren(...formula.childNodes)
}

function isTooDeep(root: Element): boolean {
  let level = [root]
  for (let depth = 0; level.length > 0; depth += 1) {
    if (depth > LEVELS_MAX) return true
    level = level.flatMap((one) => [...one.children])
  }
  return false
}

function showText(place: HTMLElement, tex: string) {
  const text = document.createElement('code')
  text.className = 'refused'
  text.title = 'This formula is nested too deep to be set.'
  text.textContent = tex.length > 200 ? `${tex.slice(0, 200)} …` : tex
  place.replaceChildren(text)
}
