/** The known name nearest to a mistyped one, within two edits; null when none is near. */
export function nearName(name: string, known: readonly string[]): string | null {
  const short = name.slice(0, 40)
  let best: string | null = null
  let least = 3
  for (const one of known) {
    if (Math.abs(one.length - short.length) > 2) continue
    const edits = editDistance(short, one)
    if (edits < least && edits < Math.max(short.length, one.length)) {
      least = edits
      best = one
    }
  }
  return best
}

/** Number of letters to insert, remove, replace, least. Source: V. I. Levenshtein, Sov. Phys. Dokl. 10 (1966) 707. */
export function editDistance(a: string, b: string): number {
  let row = Array.from({ length: b.length + 1 }, (_, j) => j)
  for (let i = 1; i <= a.length; i++) {
    const next = [i]
    for (let j = 1; j <= b.length; j++)
      next[j] = Math.min(row[j]! + 1, next[j - 1]! + 1, row[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1))
    row = next
  }
  return row[b.length]!
}
