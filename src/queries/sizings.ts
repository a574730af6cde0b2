import { useInfiniteQuery, useMutation, useQuery, useQueryCache } from '@pinia/colada'
import { toValue, type MaybeRefOrGetter } from 'vue'
import { CheckAgain, Sizing, SizingList, type SaveSizing } from '#shared/contracts/sizings'
import { call } from './api'

/** Which sizings a list shows; everyone's of every block when nothing is chosen. */
export interface SizingChoices {
  block?: string
  isMine?: boolean
}

const PAGE_ROWS = 50

/** Sizings saved so far, newest first, a page at a time. */
export const useSizings = (choices: MaybeRefOrGetter<SizingChoices> = {}) =>
  useInfiniteQuery({
    key: () => ['sizings', 'list', { ...toValue(choices) }],
    query: ({ pageParam, signal }) => {
      const { block, isMine } = toValue(choices)
      return call('/api/sizings', {
        query: { limit: PAGE_ROWS, before: pageParam, block, mine: isMine ? 'true' : undefined },
        answer: SizingList,
        signal,
      })
    },
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (last) => last.next,
    staleTime: 10_000,
  })

/** One sizing with its stored figures; only the status of its revision can change. */
export const useSizing = (number: MaybeRefOrGetter<string>) =>
  useQuery({
    key: () => ['sizings', 'one', toValue(number).toUpperCase()],
    query: ({ signal }) => call(`/api/sizings/${encodeURIComponent(toValue(number))}`, { answer: Sizing, signal }),
    staleTime: 60_000,
  })

export interface Saving {
  sizing: SaveSizing
  /** One for each act of saving, kept until it is answered: a repeated save with it makes no second sizing. */
  idempotencyKey: string
}

/** Saves a sizing for good; the answer holds the server's own figures. */
export function useSaveSizing() {
  const cache = useQueryCache()
  return useMutation({
    mutation: ({ sizing, idempotencyKey }: Saving) =>
      call('/api/sizings', { method: 'POST', body: sizing, idempotencyKey, answer: Sizing }),
    onSuccess: (saved) => {
      cache.setQueryData(['sizings', 'one', saved.number], saved)
      void cache.invalidateQueries({ key: ['sizings', 'list'] })
    },
  })
}

/** What today's engine gives differently from the stored figures. */
export const checkSizingAgain = (number: string): Promise<CheckAgain> =>
  call(`/api/sizings/${encodeURIComponent(number)}/check`, { method: 'POST', body: {}, answer: CheckAgain })
