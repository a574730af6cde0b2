import { readFileSync } from 'node:fs'
import type { RevisionStatus } from '#shared/contracts/names'
import { readBlock } from '#shared/page-source/read-block'
import { valueOf } from '#shared/problems'
import { blockRepository } from '../../src-server/blocks'
import { hashOf, pageColumns } from '../../src-server/blocks/make-revision'
import type { TestServer } from './server'
import { testServer } from './server'

/** A server with the demonstration people and the house blocks. */
export const shelfServer = () => testServer({ environment: { DEMO: '1' } })

export const houseBlock = (code: string): string => readFileSync(`content-seed/${code}.md`, 'utf8')

/** Puts a page on the shelf as a revision of the given status, by the test editor. */
export async function putRevision(
  { assembly, emailOf }: TestServer,
  text: string,
  { number, status }: { number: number; status: RevisionStatus },
): Promise<void> {
  const { database, people } = assembly
  const block = valueOf(readBlock(text))
  const author = (await people.byEmail(database.queries, emailOf('editor')))!
  const lead = (await people.byEmail(database.queries, emailOf('lead')))!
  const { code } = block.page.metadata
  await database.transaction(async (tx) => {
    const former = await blockRepository.revision(tx, code, 1)
    const blockId = former?.blockId ?? (await blockRepository.insertBlock(tx, code, new Date()))
    const approved = ['approved', 'superseded', 'withdrawn'].includes(status)
    await blockRepository.insertRevision(
      tx,
      {
        ...pageColumns(block),
        blockId,
        number,
        status,
        sourceHash: hashOf(text),
        authorId: author.id,
        authorName: author.name,
        changeNote: 'A change.',
        submittedAt: new Date(),
        ...(approved && {
          approvedById: lead.id,
          approvedByName: lead.name,
          approvedByRole: 'lead' as const,
          approvedAt: new Date(),
        }),
        ...(status === 'withdrawn' && { withdrawnReason: 'It oscillates into 100 pF.' }),
      },
      block.page.links,
    )
  })
}
