import { z } from 'zod'
import { FrontMatter } from './front-matter'
import { BlockCode, BlockFunction, Instant, RevisionStatus } from './names'

export const BLOCK_STATES = ['active', 'retired'] as const

/** The title block of a revision, as an engineering drawing carries it (ISO 7200 fields). */
export const TitleBlock = z.strictObject({
  code: BlockCode,
  title: z.string(),
  function: BlockFunction,
  topology: z.string(),
  order: z.number().int(),
  revision: z.number().int(),
  /** Newest revision number that the reader may see. */
  revisions: z.number().int(),
  status: RevisionStatus,
  owner: z.string(),
  author: z.string(),
  approvedBy: z.string().nullable(),
  /** Approval, else submission. */
  date: Instant,
})
export type TitleBlock = z.output<typeof TitleBlock>

/** One row of the shelf. */
export const ShelfRow = TitleBlock.extend({
  summary: z.string(),
  tags: z.array(z.string()),
  aliases: z.array(z.string()),
  state: z.enum(BLOCK_STATES),
  /** |H| in dB at evenly spaced log frequencies around the corner, at default values; for the row's sketch. */
  sketchDb: z.array(z.number()),
  /** Why the row matched, when searched: the words found, and where. */
  found: z.strictObject({ words: z.array(z.string()), in: z.string(), excerpt: z.string() }).nullable(),
})
export type ShelfRow = z.output<typeof ShelfRow>

export const ShelfQuery = z.strictObject({
  search: z.string().max(200).optional(),
  function: BlockFunction.optional(),
  topology: z.string().max(60).optional(),
  order: z.coerce.number().int().min(0).max(20).optional(),
  status: z.enum(['approved', 'in review']).optional(),
  limit: z.coerce.number().int().min(1).max(200).default(100),
})
export type ShelfQuery = z.output<typeof ShelfQuery>

const Count = z.strictObject({ name: z.string(), count: z.number().int() })

export const Shelf = z.strictObject({
  rows: z.array(ShelfRow),
  total: z.number().int(),
  /** Near word when nothing was found. */
  suggestion: z.string().nullable(),
  /** Choices for narrowing with how many blocks each would leave, under the other choices made. */
  narrowing: z.strictObject({
    functions: z.array(Count),
    topologies: z.array(Count),
    orders: z.array(Count),
    statuses: z.array(Count),
  }),
})
export type Shelf = z.output<typeof Shelf>

export const RevisionLine = z.strictObject({
  revision: z.number().int(),
  status: RevisionStatus,
  author: z.string(),
  approvedBy: z.string().nullable(),
  date: Instant,
  changeNote: z.string(),
})

/** A revision as its page needs it. The HTML is sanitised; circuit and calculator stand as text for the engine. */
export const BlockRevision = z.strictObject({
  titleBlock: TitleBlock,
  metadata: FrontMatter,
  state: z.enum(BLOCK_STATES),
  /** Notes as safe HTML with placeholders (data-widget) for formulas, values and widgets. */
  html: z.string(),
  /** Headings for the contents list. */
  contents: z.array(z.strictObject({ id: z.string(), text: z.string(), level: z.number().int() })),
  circuit: z.string(),
  calculator: z.string(),
  source: z.string(),
  sourceHash: z.string(),
  /** Blocks that this page links to, and that link here. */
  linksTo: z.array(BlockCode),
  linkedFrom: z.array(BlockCode),
  withdrawnReason: z.string().nullable(),
  /** Number of the approved revision now, when it is another one. */
  newerRevision: z.number().int().nullable(),
  history: z.array(RevisionLine),
})
export type BlockRevision = z.output<typeof BlockRevision>
