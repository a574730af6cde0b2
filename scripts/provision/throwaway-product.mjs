import { startProduct } from './product.mjs'
import { Refusal, step } from './report.mjs'
import { onSignals } from './signals.mjs'
import { throwawayFolder } from './throwaway-folder.mjs'

/**
 * Starts the whole product on a free port over a data folder of its own, does the work, and leaves nothing behind,
 * broken off or not. For a command's process, whose Ctrl-C it takes over.
 * @template T
 * @param {(product: Awaited<ReturnType<typeof startProduct>>) => Promise<T>} work
 * @param {Partial<Parameters<typeof startProduct>[0]>} [options]
 * @returns {Promise<T>}
 */
export async function withThrowawayProduct(work, options = {}) {
  const folder = await throwawayFolder()
  const breakingOff = new AbortController()
  const { signal } = breakingOff
  const brokenOff = new Promise((_, fail) => signal.addEventListener('abort', () => fail(signal.reason)))
  brokenOff.catch(() => {})
  onSignals(
    () => breakingOff.abort(new Refusal('The run was broken off.', 130)),
    () => process.exit(130),
  )
  try {
    const product = await startProduct({
      dataDir: folder.path,
      port: 0,
      step,
      signal,
      ...options,
    })
    try {
      return /** @type {T} */ (await Promise.race([work(product), brokenOff]))
    } finally {
      await product.stop()
    }
  } finally {
    folder.remove()
  }
}
