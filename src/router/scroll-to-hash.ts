/** Goes to the heading that the address names, once a text that came later holds it. */
export function scrollToHash(): void {
  const id = decodeURIComponent(location.hash.slice(1))
  if (id) document.getElementById(id)?.scrollIntoView()
}
