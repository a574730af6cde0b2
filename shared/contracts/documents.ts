import { z } from 'zod'

/** Help texts that the product serves. */
export const DOCUMENT_NAMES = ['block-format', 'computing'] as const

export const HelpDocument = z.strictObject({
  name: z.enum(DOCUMENT_NAMES),
  title: z.string(),
  html: z.string(),
  contents: z.array(z.strictObject({ id: z.string(), text: z.string(), level: z.number().int() })),
})
export type HelpDocument = z.output<typeof HelpDocument>
