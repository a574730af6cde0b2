import { computed } from 'vue'
import type { FormatOptions } from '#shared/quantities/format'
import { formatDb, formatDecibel, formatDegrees, formatPercent, formatQuantity } from '#shared/quantities/format'
import type { Unit } from '#shared/quantities/unit'
import { useSettings } from '../stores/settings'

/** Numbers as this person wants them shown: decimal sign, plain or coded. */
export function useShown() {
  const settings = useSettings()
  const options = computed<FormatOptions>(() => ({ decimalComma: settings.decimalSign === ',' }))
  return {
    options,
    value: (value: number, unit: string) => formatQuantity(value, unit as Unit, { ...options.value, trim: true }),
    figure: (value: number, unit: string) => formatQuantity(value, unit as Unit, options.value),
    error: (fraction: number) => formatPercent(fraction, { ...options.value, sign: true }),
    percent: (fraction: number) => formatPercent(fraction, { ...options.value, trim: true }),
    decibel: (ratio: number) => formatDecibel(ratio, options.value),
    level: (db: number) => formatDb(db, options.value),
    degrees: (rad: number) => formatDegrees(rad, options.value),
  }
}
