import type { Reading } from '../problems'
import { unread } from '../problems'
import { readQuantity } from '../quantities/read'

/** Where a gain or an impedance is taken: a frequency, a result that is one, or a limit. */
export type FigureFrequency =
  { at: 'zero' } | { at: 'high' } | { at: 'hertz'; hertz: number } | { at: 'result'; result: string }

/** A figure that can be found on a circuit: the closed list behind `is:`. */
export type Figure =
  | { kind: 'half-power'; edge: 'only' | 'lower' | 'upper' }
  | { kind: 'natural-frequency' | 'quality-factor'; pair: number }
  | { kind: 'ripple-edge'; decibel: number; edge: 'only' | 'lower' | 'upper' }
  | { kind: 'gain' | 'input-impedance' | 'output-impedance'; frequency: FigureFrequency }
  | { kind: 'peak-gain' | 'peak-frequency' | 'notch-frequency' | 'notch-depth' }

/** The words of `is:` as editors write them, for help texts and completion. */
export const FIGURE_WORDS = [
  'half-power frequency',
  'lower half-power frequency',
  'upper half-power frequency',
  'natural frequency',
  'natural frequency of pair 2',
  'quality factor',
  'quality factor of pair 2',
  'ripple edge 0.5 dB',
  'gain at 0 Hz',
  'gain at high frequency',
  'gain at 1 kHz',
  'gain at f_0',
  'peak gain',
  'peak frequency',
  'notch frequency',
  'notch depth',
  'input impedance at 0 Hz',
  'output impedance at 10 kHz',
] as const

/**
 * Reads the words of `is:`.
 * @param text as in FIGURE_WORDS
 * @param isResult tells whether a name is a result of the same calculator
 */
export function readFigure(text: string, isResult: (name: string) => boolean): Reading<Figure> {
  const words = text.trim().replace(/\s+/g, ' ')
  const edge = /^(?:(lower|upper) )?half-power frequency$/.exec(words)
  if (edge) return ok({ kind: 'half-power', edge: (edge[1] ?? 'only') as 'only' })
  const pair = /^(natural frequency|quality factor)(?: of pair ([1-9]))?$/.exec(words)
  if (pair)
    return ok({
      kind: pair[1] === 'quality factor' ? 'quality-factor' : 'natural-frequency',
      pair: Number(pair[2] ?? 1) - 1,
    })
  const ripple = /^(?:(lower|upper) )?ripple edge (\d+(?:\.\d+)?) dB$/.exec(words)
  if (ripple) return ok({ kind: 'ripple-edge', decibel: Number(ripple[2]), edge: (ripple[1] ?? 'only') as 'only' })
  const plain = /^(peak gain|peak frequency|notch frequency|notch depth)$/.exec(words)
  if (plain) return ok({ kind: plain[1]!.replace(' ', '-') as 'peak-gain' })
  const at = /^(gain|input impedance|output impedance) at (.+)$/.exec(words)
  if (at) {
    const frequency = readFrequency(at[2]!, isResult)
    if (frequency) return ok({ kind: at[1]!.replace(' ', '-') as 'gain', frequency })
  }
  return unread(
    'calculator-not-read',
    `“${words.slice(0, 60)}” is not a figure that can be found on a circuit. Known are: ${FIGURE_WORDS.join(', ')}.`,
  )
}

const ok = (value: Figure): Reading<Figure> => ({ ok: true, value })

function readFrequency(text: string, isResult: (name: string) => boolean): FigureFrequency | null {
  if (text === 'high frequency') return { at: 'high' }
  if (isResult(text)) return { at: 'result', result: text }
  const hertz = readQuantity(text, 'Hz', { allowZero: true })
  if (!hertz.ok) return null
  return hertz.value === 0 ? { at: 'zero' } : { at: 'hertz', hertz: hertz.value }
}
