import { z } from 'zod'

/** Block code: lower case in addresses, capitals in title blocks, compared without case. */
export const BlockCode = z
  .string()
  .max(40)
  .regex(/^[a-z0-9]+(-[a-z0-9]+)*$/i, 'A code is letters and digits, joined by single hyphens, such as lp1-inv.')
  .transform((code) => code.toLowerCase())
export type BlockCode = z.output<typeof BlockCode>

export const RevisionNumber = z.coerce.number().int().min(1).max(1_000_000)

/** Reference designator or calculator entry: Ri, C1, U1. */
export const PartRef = z
  .string()
  .regex(/^[RCLU][A-Za-z0-9_]{0,15}$/, 'A part name begins with R, C, L or U, such as Ri.')

/** Name of a result as editors write it: f_c, K, Z_in. */
export const ResultName = z
  .string()
  .regex(/^[A-Za-zΑ-Ωα-ω][A-Za-z0-9_Α-Ωα-ω]{0,23}$/, 'A result name is letters, digits and underscores, such as f_c.')

export const OutputName = z.string().regex(/^[A-Za-z][A-Za-z0-9_+-]{0,23}$/)

export const BLOCK_FUNCTIONS = [
  'low-pass',
  'high-pass',
  'band-pass',
  'band-stop',
  'all-pass',
  'shelving',
  'gain',
] as const
export const BlockFunction = z.enum(BLOCK_FUNCTIONS)
export type BlockFunction = z.output<typeof BlockFunction>

export const REVISION_STATUSES = ['in review', 'returned', 'approved', 'superseded', 'withdrawn'] as const
export const RevisionStatus = z.enum(REVISION_STATUSES)
export type RevisionStatus = z.output<typeof RevisionStatus>

export const ROLES = ['reader', 'editor', 'lead'] as const
export const Role = z.enum(ROLES)
export type Role = z.output<typeof Role>

/** S-1234: the number of a sizing, written with its letter. */
export const SizingNumber = z
  .string()
  .regex(/^S-[1-9][0-9]{0,8}$/i, 'A sizing number looks like S-12.')
  .transform((text) => text.toUpperCase())

/** An instant as ISO 8601 in UTC. */
export const Instant = z.iso.datetime()

/** A name as it stands on a drawing. */
export const PersonName = z.strictObject({ name: z.string(), role: Role })
