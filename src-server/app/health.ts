import { z } from 'zod'
import { ProblemError } from '#shared/problems'
import type { Database } from '../database'
import { route } from '../http'

const Note = z.strictObject({ level: z.enum(['note', 'warning', 'refused']), setting: z.string(), detail: z.string() })
export const Ready = z.strictObject({ status: z.literal('ready'), database: z.string(), notes: z.array(Note) })

interface Needs {
  database: Database
  isStopping: () => boolean
}

/** For whoever watches the node: does it run, and can it serve. */
export const healthRoutes = ({ database, isStopping }: Needs) => [
  route('GET /health/live', { role: 'none', answer: { 200: z.strictObject({ status: z.literal('live') }) } }, () => ({
    status: 'live' as const,
  })),
  route('GET /health/ready', { role: 'none', answer: { 200: Ready } }, async ({ express: { res } }) => {
    res.setHeader('Cache-Control', 'no-store')
    if (isStopping()) throw new ProblemError('overloaded', 'This node is stopping; it takes no new work.')
    if (database.isReady()) await database.probe()
    const { state, sentence, notes } = database.condition()
    if (state !== 'ready') throw new ProblemError('database-away', sentence)
    return { status: 'ready' as const, database: sentence, notes }
  }),
]
