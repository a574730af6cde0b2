const RELOADED_FOR = 'poleshelf.reloaded-for'

/**
 * After a new version was put in place, an old page asks for files that are gone. It is reloaded once at the address
 * it was going to; what is unfinished is kept by the pages themselves.
 */
export function reloadOnce(address: string): void {
  try {
    if (sessionStorage.getItem(RELOADED_FOR) === address) return
    sessionStorage.setItem(RELOADED_FOR, address)
  } catch {
    return
  }
  location.assign(address)
}

/** Says that a page came up, so that a later version may reload again. */
export function pageCameUp(): void {
  try {
    sessionStorage.removeItem(RELOADED_FOR)
  } catch {
    // Nothing was stored, so nothing is to be taken away.
  }
}

export const isMissingFile = (error: unknown): boolean =>
  error instanceof Error &&
  /dynamically imported module|importing a module script|preload CSS|load module script/i.test(error.message)
