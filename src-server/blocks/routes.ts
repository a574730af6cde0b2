import { z } from 'zod'
import { BlockRevision, Shelf, ShelfQuery } from '#shared/contracts/blocks'
import { BlockCode, RevisionNumber } from '#shared/contracts/names'
import { route } from '../http'
import type { BlockService } from './service'

export const CodeParams = z.strictObject({ code: BlockCode })
export const RevisionParams = CodeParams.extend({ number: RevisionNumber })

export const blockRoutes = (blocks: BlockService) => [
  route('GET /api/blocks', { role: 'reader', query: ShelfQuery, answer: { 200: Shelf } }, ({ query }) =>
    blocks.shelf(query),
  ),
  route('GET /api/blocks/:code', { role: 'reader', params: CodeParams, answer: { 200: BlockRevision } }, ({ params }) =>
    blocks.page(params.code),
  ),
  route(
    'GET /api/blocks/:code/revisions/:number',
    { role: 'reader', params: RevisionParams, answer: { 200: BlockRevision } },
    ({ params }) => blocks.page(params.code, params.number),
  ),
]
