/**
 * Lets wide tables and code scroll within themselves, so that the page never scrolls sideways; what does scroll can be
 * reached by keyboard and has a name.
 *
 * @returns how to stop following changes of width
 */
export function keepWideInside(root: HTMLElement): () => void {
  for (const table of root.querySelectorAll('table')) {
    if (table.closest('.scrolls')) continue
    const frame = document.createElement('div')
    frame.className = 'scrolls'
    table.replaceWith(frame)
    frame.append(table)
  }
  const frames = root.querySelectorAll<HTMLElement>('.scrolls, pre')
  const observer = new ResizeObserver((changes) => {
    for (const { target } of changes) nameIfWide(target as HTMLElement)
  })
  for (const frame of frames) observer.observe(frame)
  return () => observer.disconnect()
}

function nameIfWide(frame: HTMLElement): void {
  if (frame.scrollWidth > frame.clientWidth) {
    frame.tabIndex = 0
    frame.setAttribute('role', 'group')
    frame.setAttribute('aria-label', frame.matches('pre') ? 'Code, scrolls sideways' : 'Table, scrolls sideways')
  } else for (const name of ['tabindex', 'role', 'aria-label']) frame.removeAttribute(name)
}
