import { useQuery } from '@pinia/colada'
import { toValue, type MaybeRefOrGetter } from 'vue'
import { BlockRevision, Shelf, type ShelfQuery } from '#shared/contracts/blocks'
import { call } from './api'

export type ShelfChoices = Partial<Omit<ShelfQuery, 'limit'>>

/** Blocks that the choices leave, with counts for narrowing further. The former rows stay until the new ones are in. */
export const useShelf = (choices: MaybeRefOrGetter<ShelfChoices>) =>
  useQuery({
    key: () => ['blocks', 'shelf', { ...toValue(choices) }],
    query: ({ signal }) => call('/api/blocks', { query: { ...toValue(choices) }, answer: Shelf, signal }),
    placeholderData: (before?: Shelf) => before,
    staleTime: 30_000,
  })

/** One revision of a block: the one in force when no number is given. */
export const useBlock = (code: MaybeRefOrGetter<string>, revision?: MaybeRefOrGetter<number | undefined>) =>
  useQuery({
    key: () => ['blocks', 'revision', toValue(code).toLowerCase(), toValue(revision) ?? 'in force'],
    query: ({ signal }) => call(addressOfBlock(toValue(code), toValue(revision)), { answer: BlockRevision, signal }),
    staleTime: 60_000,
  })

const addressOfBlock = (code: string, revision?: number): string => {
  const block = `/api/blocks/${encodeURIComponent(code)}`
  return revision === undefined ? block : `${block}/revisions/${revision}`
}
