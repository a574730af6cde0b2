import type { BlockRevision, Shelf, ShelfQuery } from '#shared/contracts/blocks'
import { ProblemError } from '#shared/problems'
import { writePage } from '#shared/page-source/write-page'
import type { Database } from '../database'
import type { PageRenderer } from '../page-rendering'
import { directness, explainMatch, searchRevisions, searchTokens, suggestion, wordsOf } from '../search'
import { narrow, narrowingOf } from './narrowing'
import type { BlockRepository, RevisionLineRow, WholeRevision } from './repository'
import { stageKeeper } from './stage-keeper'
import { historyLine, metadataOf, titleBlockOf } from './title-block'

interface Needs {
  database: Database
  blocks: BlockRepository
  renderPage: PageRenderer
}

/** The answer for what is not there and for what one may not see: the same. */
const nothingHere = () => new ProblemError('not-found', 'There is no such block or revision here.')

export function blockService({ database, blocks, renderPage }: Needs) {
  const { queries } = database
  const stageOf = stageKeeper()

  const keptRevision = async (code: string, number?: number): Promise<WholeRevision> => {
    const found =
      number === undefined ? await blocks.current(queries, code) : await blocks.revision(queries, code, number)
    if (!found) throw nothingHere()
    return found
  }

  const revisionOf = async (code: string, number?: number): Promise<WholeRevision> => {
    const found = await keptRevision(code, number)
    if (found.status === 'returned') throw nothingHere()
    return found
  }

  return {
    /** A revision that may be looked up: not one that was returned. @throws {ProblemError} 'not-found' */
    revisionOf,
    /** A revision whatever became of it: for the sizings that were saved on it. @throws {ProblemError} 'not-found' */
    keptRevision,
    /** Number of the approved revision of a block, null while it has none. */
    async approvedNumber(code: string): Promise<number | null> {
      const current = await blocks.current(queries, code)
      return current?.status === 'approved' ? current.number : null
    },
    stageOf,

    /** The shelf: approved blocks, or what is in review when that is asked for; searched and narrowed. */
    async shelf(query: ShelfQuery): Promise<Shelf> {
      const statuses = await blocks.lines(queries, ['approved', 'in review'])
      const wanted = query.status ?? 'approved'
      const all = newestOfEach(statuses.filter((row) => row.status === wanted))
      const tokens = searchTokens(query.search ?? '')
      const found = tokens.length
        ? await searchRevisions(
            queries,
            all.map((row) => row.id),
            tokens,
          )
        : null
      const searched = found
        ? found
            .map((id) => all.find((row) => row.id === id)!)
            .sort((a, b) => directness(a, tokens) - directness(b, tokens))
        : all
      const rows = narrow(searched, query)
      const shown = rows.slice(0, query.limit)
      const notes = tokens.length
        ? await blocks.notes(
            queries,
            shown.map((row) => row.id),
          )
        : new Map<number, string>()
      const vocabulary = new Set(all.flatMap((row) => wordsOf(`${row.searchTitle} ${row.searchWords}`)))
      return {
        rows: shown.map((row) => ({
          ...titleBlockOf(row, row.number),
          summary: row.summary,
          tags: row.tags,
          aliases: row.aliases,
          state: row.state,
          sketchDb: row.sketchDb,
          found: tokens.length
            ? explainMatch(
                {
                  title: row.searchTitle,
                  words: row.searchWords,
                  parts: row.searchParts,
                  notes: notes.get(row.id) ?? '',
                },
                tokens,
              )
            : null,
        })),
        total: rows.length,
        suggestion: tokens.length && rows.length === 0 ? suggestion(tokens, vocabulary) : null,
        narrowing: narrowingOf(searched, query, statuses),
      }
    },

    /** A block's approved revision, or the one named, with its page rendered. */
    async page(code: string, number?: number): Promise<BlockRevision> {
      const revision = await revisionOf(code, number)
      const history = await blocks.history(queries, revision.blockId)
      const links = await blocks.links(queries, revision.id, revision.code)
      const { page } = stageOf(revision)
      const approved = history.find((one) => one.status === 'approved')
      const visible = history.filter((one) => one.status !== 'returned')
      const { html, contents } = renderPage(revision.source)
      return {
        titleBlock: titleBlockOf(revision, Math.max(...visible.map((one) => one.number))),
        metadata: metadataOf(revision),
        state: revision.state,
        html,
        contents,
        circuit: page.circuit.text,
        calculator: page.calculator.text,
        source: writePage(metadataOf(revision), revision.source),
        sourceHash: revision.sourceHash,
        linksTo: links.to,
        linkedFrom: links.from,
        withdrawnReason: revision.withdrawnReason,
        newerRevision: approved && approved.number > revision.number ? approved.number : null,
        history: visible.map(historyLine),
      }
    },
  }
}
export type BlockService = ReturnType<typeof blockService>

/** The first row of each block: rows come newest first. */
function newestOfEach(rows: RevisionLineRow[]): RevisionLineRow[] {
  const seen = new Set<number>()
  return rows.filter((row) => !seen.has(row.blockId) && seen.add(row.blockId))
}
