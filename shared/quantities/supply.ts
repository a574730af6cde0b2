import type { Reading } from '../problems'
import { unread } from '../problems'
import { formatQuantity } from './format'
import { readQuantity } from './read'

export interface SupplyVolt {
  plusVolt: number
  minusVolt: number
}

/**
 * Reads a supply as it stands on a drawing: `±5 V`, `3.3 V` (single), `+12/-5 V`.
 * @example readSupply('±5 V') // { ok: true, value: { plusVolt: 5, minusVolt: -5 } }
 */
export function readSupply(text: string): Reading<SupplyVolt> {
  const typed = text
    .trim()
    .slice(0, 60)
    .replace(/\u2212/g, '-')
  const both = /^(?:±|\+\/-|\+-)\s*(.+)$/.exec(typed)
  const pair = /^\+?([^/]+?)\s*(?:V)?\s*\/\s*(-.+)$/.exec(typed)
  const volt = (one: string) => readQuantity(one, 'V', { allowNegative: true, allowZero: true })
  const [plus, minus] = both ? [both[1]!, `-${both[1]}`] : pair ? [pair[1]!, pair[2]!] : [typed, '0']
  const [high, low] = [volt(plus), volt(minus)]
  if (high.ok && low.ok && high.value > low.value && high.value - low.value <= 1000)
    return { ok: true, value: { plusVolt: high.value, minusVolt: low.value } }
  return unread('value-not-read', `“${text.slice(0, 40)}” is not a supply. Write ±5 V, 3.3 V or +12/−5 V.`)
}

/** A supply as readSupply takes it. */
export function formatSupply({ plusVolt, minusVolt }: SupplyVolt): string {
  const volt = (value: number) => formatQuantity(value, 'V', { trim: true })
  if (minusVolt === 0) return volt(plusVolt)
  return plusVolt === -minusVolt ? `±${volt(plusVolt)}` : `+${volt(plusVolt)}/${volt(minusVolt)}`
}
