const PREFIX = 'POLESHELF_'
/** From this length on two slips are taken for a misspelling; short names have too many neighbours. */
const LONG_NAME = 7

/**
 * The name that a variable was meant to have, if it looks misspelt.
 * @param {string} given @param {readonly string[]} known
 * @returns {string | null}
 */
export function nearName(given, known) {
  if (known.includes(given)) return null
  const bare = given.startsWith(PREFIX) ? given.slice(PREFIX.length) : given
  if (given !== bare && known.includes(bare)) return bare
  const near = known
    .map((name) => ({ name, slips: slipsBetween(bare.toUpperCase(), name) }))
    .filter(({ name, slips }) => slips <= slipsAllowed(name, bare))
    .sort((a, b) => a.slips - b.slips)
  return near[0]?.name ?? null
}

function slipsAllowed(name, given) {
  if (name.length >= LONG_NAME) return 2
  // Small letters in a short name are another program's: `port`, `host`.
  return given === given.toUpperCase() ? 1 : -1
}

/** Letters wrong, missing, too many or swapped with a neighbour (Damerau 1964, optimal string alignment). */
function slipsBetween(a, b) {
  const rows = Array.from({ length: a.length + 1 }, (_, i) => [i, ...Array(b.length).fill(0)])
  for (let j = 1; j <= b.length; j += 1) rows[0][j] = j
  for (let i = 1; i <= a.length; i += 1)
    for (let j = 1; j <= b.length; j += 1) {
      const isSame = a[i - 1] === b[j - 1]
      rows[i][j] = Math.min(rows[i - 1][j] + 1, rows[i][j - 1] + 1, rows[i - 1][j - 1] + (isSame ? 0 : 1))
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        rows[i][j] = Math.min(rows[i][j], rows[i - 2][j - 2] + 1)
    }
  return rows[a.length][b.length]
}
