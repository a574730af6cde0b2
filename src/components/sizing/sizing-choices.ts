import type { SizingChoices } from '../../queries/sizings'

type Query = Record<string, string | null | undefined | readonly (string | null)[]>

/** Which sizings an address asks for: `?mine=true&block=lp1-inv`; what cannot be one is passed over. */
export function sizingChoicesOf({ block, mine }: Query): SizingChoices {
  const isCode = typeof block === 'string' && /^[a-z0-9]+(-[a-z0-9]+)*$/i.test(block) && block.length <= 40
  return { ...(isCode && { block: block.toLowerCase() }), ...(mine === 'true' && { isMine: true }) }
}

/** The address of a list with these choices. */
export function sizingListAddress({ block, isMine }: SizingChoices): string {
  const query = new URLSearchParams({ ...(isMine && { mine: 'true' }), ...(block !== undefined && { block }) })
  return query.size === 0 ? '/sizings' : `/sizings?${query}`
}
