/** Gives every name of a circuit a word that simulators take as a name and as nothing else. */
export class SafeNames {
  private readonly taken: Set<string>
  private readonly given = new Map<string, string>()

  constructor(reserved: readonly string[] = []) {
    this.taken = new Set(reserved.map((name) => name.toLowerCase()))
  }

  /** The word for a name, the same each time: letters, digits and _, at most 40, alone in either case. */
  of(name: string, letter = ''): string {
    const key = `${letter} ${name}`
    const known = this.given.get(key)
    if (known !== undefined) return known
    const spelled =
      name
        .replace(/\+$/, '_p')
        .replace(/-$/, '_n')
        .replace(/[^A-Za-z0-9_]+/g, '_')
        .slice(0, 32) || '_'
    // Zeros alone are ground in some places.
    const wish = /^0+$/.test(spelled) ? `n${spelled}` : spelled
    const fits = wish.length > 1 && wish.toUpperCase().startsWith(letter)
    const word = this.free(fits || letter === '' ? wish : letter + wish)
    this.given.set(key, word)
    return word
  }

  /** A word that is not in use yet. */
  free(wish: string): string {
    let word = wish
    for (let k = 2; this.taken.has(word.toLowerCase()); k++) word = `${wish}_${k}`
    this.taken.add(word.toLowerCase())
    return word
  }
}

/** Text for a comment line: printable ASCII on one line, at most 200 characters. */
export const commentText = (text: string): string =>
  text
    .replace(/[^\x20-\x7e]+/g, ' ')
    .trim()
    .slice(0, 200)
