import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { startProduct } from './product.mjs'
import { step } from './report.mjs'

/**
 * Starts the whole product on a free port over a data folder of its own, does the work, and leaves nothing behind.
 * @template T
 * @param {(product: Awaited<ReturnType<typeof startProduct>>) => Promise<T>} work
 * @param {Partial<Parameters<typeof startProduct>[0]>} [options]
 * @returns {Promise<T>}
 */
export async function withThrowawayProduct(work, options = {}) {
  const dataDir = mkdtempSync(join(tmpdir(), 'poleshelf-product-'))
  try {
    const product = await startProduct({ dataDir, port: 0, step, ...options })
    try {
      return await work(product)
    } finally {
      await product.stop()
    }
  } finally {
    rmSync(dataDir, { recursive: true, force: true })
  }
}
