import { readdir, readFile } from 'node:fs/promises'
import { join } from 'node:path'
import type { Logger } from 'pino'
import { readBlock, type Block } from '#shared/page-source/read-block'
import type { Database } from '../database'
import { isDuplicate } from '../database'
import { hashOf, pageColumns } from './make-revision'
import type { BlockRepository } from './repository'

interface Author {
  id: number
  name: string
}

interface Needs {
  database: Database
  blocks: BlockRepository
  folder: string
  author: Author
  approver: Author
  now: () => Date
  log: Logger
}

/**
 * Loads the house blocks once: each file that has never been loaded, as an approved first revision. A file that an
 * upgrade changed is left alone. A file that does not read, or whose self-check differs, stops the start with its place.
 */
export async function loadSeedBlocks(needs: Needs): Promise<void> {
  const { database, blocks, folder, log } = needs
  const marked = new Set((await blocks.seedMarks(database.queries)).map((mark) => mark.file))
  const files = (await readdir(folder)).filter((file) => file.endsWith('.md') && !marked.has(file)).sort()
  for (const file of files) {
    const text = await readFile(join(folder, file), 'utf8')
    await loadOne(needs, file, text, readSeed(file, text))
    log.info({ file }, 'house block loaded')
  }
}

function readSeed(file: string, text: string): Block {
  const reading = readBlock(text)
  if (reading.ok) return reading.value
  const { line, column, detail } = reading.problems[0]
  throw new Error(`content-seed/${file}:${line ?? 1}:${column ?? 1} ${detail}`)
}

async function loadOne({ database, blocks, author, approver, now }: Needs, file: string, text: string, block: Block) {
  const columns = pageColumns(block)
  if (columns.selfCheck.outcome === 'differs') {
    const line = columns.selfCheck.lines.find((one) => one.outcome === 'differs')
    throw new Error(`content-seed/${file}: ${line?.subject} differs from the circuit. ${line?.detail}`)
  }
  try {
    await database.transaction(async (tx) => {
      const { code } = block.page.metadata
      const at = now()
      await blocks.markSeed(tx, { file, fileHash: hashOf(text), loadedAt: at })
      if ((await blocks.codesTaken(tx, [code])).has(code)) return
      const blockId = await blocks.insertBlock(tx, code, at)
      await blocks.insertRevision(
        tx,
        {
          ...columns,
          blockId,
          number: 1,
          sourceHash: hashOf(text),
          authorId: author.id,
          authorName: author.name,
          changeNote: 'First house revision.',
          status: 'approved',
          submittedAt: at,
          approvedById: approver.id,
          approvedByName: approver.name,
          approvedByRole: 'lead',
          approvedAt: at,
        },
        block.page.links,
      )
    })
  } catch (error) {
    // Another node loaded it at the same moment.
    if (!isDuplicate(error)) throw error
  }
}
