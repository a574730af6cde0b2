import { z } from 'zod'

/** RFC 9457 problem details, as every error answer carries them. */
export const ProblemDocument = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  instance: z.string(),
  detail: z.string(),
  errors: z
    .array(
      z.object({
        pointer: z.string().optional(),
        line: z.number().optional(),
        column: z.number().optional(),
        detail: z.string(),
      }),
    )
    .optional(),
})
export type ProblemDocument = z.output<typeof ProblemDocument>
