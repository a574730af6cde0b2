import { z } from 'zod'
import { TitleBlock } from './blocks'
import { Figure, LimitOutcome, Quantity, SelfCheck, StageOutcome, ResponseVector } from './compute'
import { Conditions } from './conditions'
import { BlockCode, Instant, RevisionNumber, RevisionStatus, SizingNumber } from './names'

export const NOTE_MAX = 2000
export const REASON_MAX = 500

/** Half a surrogate pair cannot be stored as it was typed. */
const wholeText = (most: number) =>
  z
    .string()
    .trim()
    .max(most)
    .regex(/^\P{Surrogate}*$/u, 'This text holds half a character; type it again.')

/** What the browser sends; the server computes its own results from it. */
export const SaveSizing = z.strictObject({
  block: BlockCode,
  revision: RevisionNumber,
  values: z.record(z.string().max(40), Quantity).default({}),
  targets: z.record(z.string().max(40), Quantity).default({}),
  conditions: z.record(z.string().max(40), Quantity).default({}),
  series: z.record(z.string().max(40), z.string().max(8)).default({}),
  goodEnough: z.number().min(0).max(0.5).default(0),
  note: wholeText(NOTE_MAX).default(''),
  /** Needed when a limit is not kept. */
  reason: wholeText(REASON_MAX).default(''),
})
export type SaveSizing = z.input<typeof SaveSizing>

/** Op-amp data copied into a sizing; empty while none is chosen. */
export const OpAmpCopies = z.record(z.string(), z.record(z.string(), z.union([z.number(), z.string()])))

export const TestPoint = z.strictObject({ frequencyHz: z.number(), gainDb: Figure, phaseRad: Figure })

/** A sizing: immutable, with the server's own figures. */
export const Sizing = z.strictObject({
  number: SizingNumber,
  /** The title block as it was. */
  titleBlock: TitleBlock,
  /** Status of the revision now; reason when withdrawn. */
  statusNow: RevisionStatus,
  withdrawnReason: z.string().nullable(),
  newerRevision: z.number().int().nullable(),
  asked: SaveSizing.omit({ note: true, reason: true }),
  outcome: StageOutcome,
  conditions: Conditions,
  opAmps: OpAmpCopies,
  limitsNotKept: z.array(LimitOutcome),
  note: z.string(),
  reason: z.string(),
  response: ResponseVector,
  /** arg H unwrapped by the house convention, rad, as long as the response. */
  phaseRad: z.array(Figure),
  testTable: z.array(TestPoint),
  selfCheck: SelfCheck,
  engineVersion: z.string(),
  savedBy: z.string(),
  savedAt: Instant,
  /** Permanent address, absolute. */
  link: z.string(),
  circuit: z.string(),
  calculator: z.string(),
})
export type Sizing = z.output<typeof Sizing>

/** One line of the list of sizings. */
export const SizingLine = z.strictObject({
  number: SizingNumber,
  block: BlockCode,
  title: z.string(),
  revision: z.number().int(),
  statusNow: RevisionStatus,
  targets: z.record(z.string(), z.number()),
  /** Units of the targets. */
  units: z.record(z.string(), z.string()).default({}),
  note: z.string(),
  savedBy: z.string(),
  savedAt: Instant,
})
export const SizingList = z.strictObject({ rows: z.array(SizingLine), next: z.string().nullable() })
export type SizingList = z.output<typeof SizingList>

/** What today's engine gives differently from the stored figures. */
export const CheckAgain = z.strictObject({
  engineVersion: z.string(),
  storedEngineVersion: z.string(),
  differences: z.array(z.strictObject({ name: z.string(), stored: Figure, now: Figure, relative: Figure })),
})
export type CheckAgain = z.output<typeof CheckAgain>
