import { valueOf } from '#shared/problems'
import { readBlock, type Block } from '#shared/page-source/read-block'
import { writePage } from '#shared/page-source/write-page'
import type { WholeRevision } from './repository'
import { metadataOf } from './title-block'

const KEPT_MAX = 100

/** Reads the page of a revision once; revisions never change, so what was read is kept by its id. */
export function stageKeeper() {
  const kept = new Map<number, Block>()
  return (revision: WholeRevision): Block => {
    const found = kept.get(revision.id)
    if (found) return found
    const block = valueOf(readBlock(writePage(metadataOf(revision), revision.source)))
    if (kept.size >= KEPT_MAX) kept.delete(kept.keys().next().value!)
    kept.set(revision.id, block)
    return block
  }
}
