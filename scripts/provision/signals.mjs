/** A terminal and npm both hand on the same Ctrl-C; what comes this soon after the first is no second wish. */
const SAME_WISH_MS = 800

/**
 * Calls `onFirst` on the first Ctrl-C, SIGTERM or hang-up, and `onSecond` on the next.
 * @param {(signal: string) => void} onFirst @param {() => void} onSecond
 */
export function onSignals(onFirst, onSecond) {
  let firstAt = 0
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'])
    process.on(signal, () => {
      const now = performance.now()
      if (firstAt === 0) {
        firstAt = now
        onFirst(signal)
      } else if (now - firstAt > SAME_WISH_MS) onSecond()
    })
}
