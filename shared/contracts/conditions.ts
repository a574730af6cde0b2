import { z } from 'zod'

/** What surrounds the stage, in SI units. Absent: ideal (0 Ω source, no load), or not stated. */
export const Conditions = z.strictObject({
  sourceOhm: z.number().min(0).max(1e12).optional(),
  loadOhm: z.number().positive().max(1e15).optional(),
  loadFarad: z.number().min(0).max(1).optional(),
  supplyPlusVolt: z.number().min(-1000).max(1000).optional(),
  supplyMinusVolt: z.number().min(-1000).max(1000).optional(),
  temperatureKelvin: z.number().positive().max(1000).optional(),
  levelVoltPeak: z.number().min(0).max(1000).optional(),
})
export type Conditions = z.output<typeof Conditions>

export const CONDITION_NAMES = Object.keys(Conditions.shape) as (keyof Conditions)[]

/** Unit, symbol and words of each condition, for fields, addresses and sheets. */
export const CONDITION_FIELDS = {
  sourceOhm: { unit: 'Ω', label: 'source', meaning: 'source resistance' },
  loadOhm: { unit: 'Ω', label: 'load', meaning: 'load resistance' },
  loadFarad: { unit: 'F', label: 'load C', meaning: 'load capacitance' },
  supplyPlusVolt: { unit: 'V', label: 'supply +', meaning: 'positive supply' },
  supplyMinusVolt: { unit: 'V', label: 'supply −', meaning: 'negative supply' },
  temperatureKelvin: { unit: 'K', label: 'temperature', meaning: 'temperature' },
  levelVoltPeak: { unit: 'V', label: 'level', meaning: 'largest signal at the input, peak' },
} as const satisfies Record<keyof Conditions, { unit: string; label: string; meaning: string }>
