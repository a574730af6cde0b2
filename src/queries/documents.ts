import { useQuery } from '@pinia/colada'
import { toValue, type MaybeRefOrGetter } from 'vue'
import { HelpDocument } from '#shared/contracts/documents'
import { call } from './api'

/** A page of the help, as sanitised HTML. */
export const useHelpDocument = (name: MaybeRefOrGetter<string>) =>
  useQuery({
    key: () => ['documents', toValue(name)],
    query: ({ signal }) =>
      call(`/api/documents/${encodeURIComponent(toValue(name))}`, { answer: HelpDocument, signal }),
    staleTime: 600_000,
  })
