import type { LocationQuery } from 'vue-router'
import { ShelfQuery } from '#shared/contracts/blocks'
import type { ShelfChoices } from '../../queries/blocks'

const NAMES = ['search', 'function', 'topology', 'order', 'status'] as const

/** The choices that an address states; what it states wrongly is left out. */
export function choicesOf(query: LocationQuery): ShelfChoices {
  const stated = NAMES.flatMap((name) => {
    const value = query[name]
    return typeof value === 'string' && value.trim() !== '' ? [[name, value.trim()]] : []
  })
  const read = stated.filter(([name, value]) => ShelfQuery.safeParse({ [name!]: value }).success)
  const { limit: _limit, ...choices } = ShelfQuery.parse(Object.fromEntries(read))
  return choices
}

/** What the shelf shows, in a sentence: "2 inverting low-pass blocks of order 1 for “anti alias”". */
export function sentenceOf(total: number, choices: ShelfChoices): string {
  const kind = [choices.topology, choices.function].filter(Boolean).join(' ')
  const count = total === 0 ? 'No' : String(total)
  const parts = [
    `${count} ${kind ? `${kind} ` : ''}${total === 1 ? 'block' : 'blocks'}`,
    choices.order === undefined ? '' : `of order ${choices.order}`,
    choices.status === 'in review' ? 'in review' : '',
    choices.search ? `for “${choices.search}”` : 'on the shelf',
  ]
  return parts.filter(Boolean).join(' ')
}
