import { z } from 'zod'
import { BlockCode, SizingNumber } from '#shared/contracts/names'
import { CheckAgain, SaveSizing, Sizing, SizingList } from '#shared/contracts/sizings'
import { route } from '../http'
import type { SizingService } from './service'

const NumberParams = z.strictObject({ number: SizingNumber })
const ListQuery = z.strictObject({
  limit: z.coerce.number().int().min(1).max(200).default(50),
  before: z.coerce.number().int().min(1).optional(),
  block: BlockCode.optional(),
  mine: z.stringbool().optional(),
})

const digitsOf = (number: string) => Number(number.slice(2))

export const sizingRoutes = (sizings: SizingService) => [
  route(
    'POST /api/sizings',
    { role: 'reader', idempotent: true, body: SaveSizing, answer: { 201: Sizing } },
    ({ body, person, request }) => sizings.save(body, person, request.idempotencyKey),
  ),
  route('GET /api/sizings', { role: 'reader', query: ListQuery, answer: { 200: SizingList } }, ({ query, person }) =>
    sizings.list(query, person),
  ),
  route('GET /api/sizings/:number', { role: 'reader', params: NumberParams, answer: { 200: Sizing } }, ({ params }) =>
    sizings.open(digitsOf(params.number)),
  ),
  route(
    'POST /api/sizings/:number/check',
    { role: 'reader', params: NumberParams, answer: { 200: CheckAgain } },
    ({ params }) => sizings.checkAgain(digitsOf(params.number)),
  ),
]
