import { useQuery } from '@pinia/colada'
import { toValue, type MaybeRefOrGetter } from 'vue'
import { z } from 'zod'
import { call } from './api'

const HelpDocument = z.object({
  name: z.string(),
  title: z.string(),
  html: z.string(),
  contents: z.array(z.object({ id: z.string(), text: z.string(), level: z.number().int() })),
})
export type HelpDocument = z.output<typeof HelpDocument>

/** A page of the help, as sanitised HTML. */
export const useHelpDocument = (name: MaybeRefOrGetter<string>) =>
  useQuery({
    key: () => ['documents', toValue(name)],
    query: ({ signal }) =>
      call(`/api/documents/${encodeURIComponent(toValue(name))}`, { answer: HelpDocument, signal }),
    staleTime: 600_000,
  })
