import type { BlockRevision, TitleBlock } from '#shared/contracts/blocks'
import type { FrontMatter } from '#shared/contracts/front-matter'
import type { BlockRepository, RevisionLineRow, WholeRevision } from './repository'

/** The title block of a revision; `revisions` is the newest number that the reader may see. */
export function titleBlockOf(row: RevisionLineRow, newest: number): TitleBlock {
  return {
    code: row.code,
    title: row.title,
    function: row.function,
    topology: row.topology,
    order: row.order,
    revision: row.number,
    revisions: newest,
    status: row.status,
    owner: row.owner,
    author: row.authorName,
    approvedBy: row.approvedByName,
    date: (row.approvedAt ?? row.submittedAt).toISOString(),
  }
}

/** Front matter of a revision, from its columns. */
export function metadataOf(row: WholeRevision): FrontMatter {
  return {
    format: 1,
    code: row.code,
    title: row.title,
    function: row.function,
    topology: row.topology,
    order: row.order,
    tags: row.tags,
    aliases: row.aliases,
    owner: row.owner,
    summary: row.summary,
  }
}

export const historyLine = (
  row: Awaited<ReturnType<BlockRepository['history']>>[number],
): BlockRevision['history'][number] => ({
  revision: row.number,
  status: row.status,
  author: row.authorName,
  approvedBy: row.approvedByName,
  date: (row.approvedAt ?? row.submittedAt).toISOString(),
  changeNote: row.changeNote,
})
