import type { Conditions } from '#shared/contracts/conditions'
import type { SelfCheck } from '#shared/contracts/compute'
import type { Sizing } from '#shared/contracts/sizings'
import { formatSupply } from '#shared/quantities/supply'
import { differenceWords } from '../bench/difference-words'

type Text = (value: number, unit: string) => string

const ZERO_CELSIUS_KELVIN = 273.15

/** What surrounded the stage, each condition with its words; source and load are named also when they are ideal. */
export function conditionWords(conditions: Conditions, text: Text): { label: string; value: string }[] {
  const { sourceOhm, loadOhm, loadFarad, supplyPlusVolt, supplyMinusVolt, levelVoltPeak, temperatureKelvin } =
    conditions
  const loads = [loadOhm !== undefined && text(loadOhm, 'Ω'), loadFarad !== undefined && text(loadFarad, 'F')]
  const supply =
    supplyPlusVolt === undefined ? null : formatSupply({ plusVolt: supplyPlusVolt, minusVolt: supplyMinusVolt ?? 0 })
  const celsius = (kelvin: number) => `${Number((kelvin - ZERO_CELSIUS_KELVIN).toFixed(2))}\u2009°C`.replace('-', '−')
  return [
    { label: 'source', value: text(sourceOhm ?? 0, 'Ω') },
    { label: 'load', value: loads.filter(Boolean).join(' ∥ ') || 'none' },
    ...(supply === null ? [] : [{ label: 'supply', value: supply }]),
    ...(levelVoltPeak === undefined ? [] : [{ label: 'largest signal, peak', value: text(levelVoltPeak, 'V') }]),
    ...(temperatureKelvin === undefined ? [] : [{ label: 'temperature', value: celsius(temperatureKelvin) }]),
  ]
}

/** The stored self-check in one sentence with its figure. */
export function selfCheckSentence(check: SelfCheck): string {
  const named = (outcome: string) => check.lines.filter((line) => line.outcome === outcome).map((line) => line.subject)
  const unchecked = named('not checked')
  if (check.outcome === 'not checked') return '△ Formulas are not checked against the circuit.'
  if (check.outcome === 'differs')
    return `△ Formula and circuit differ by ${differenceWords(check.worstRelativeDifference)}: ${named('differs').join(', ')}. Do not use these figures.`
  const rest = unchecked.length ? `; not checked: ${unchecked.join(', ')}` : ''
  return `✓ Formulas and circuit agree to ${differenceWords(check.worstRelativeDifference)}, at these values and at ${check.sets} other sets${rest}.`
}

/** How good the set is, in one sentence; null when nothing was solved. */
export function bestSentence({ outcome }: Sizing, percent: (fraction: number) => string): string | null {
  if (outcome.setsTried === 0) return null
  const errors = Object.values(outcome.results).map((one) => Math.abs(one.relativeError ?? 0))
  const sets = String(outcome.setsTried).replace(/\B(?=(\d{3})+$)/g, '\u2009')
  return `Best of ${sets} sets from stock, worst error ${percent(Math.max(0, ...errors))}.`
}

/** A Markdown link that says what is behind it: the first result that was asked, as fitted. */
export function markdownLink(sizing: Sizing, text: Text): string {
  const results = Object.entries(sizing.outcome.results)
  const [name, result] = results.find(([, one]) => one.target !== undefined) ?? results[0] ?? []
  const figure = name && result ? `, ${name} ${text(result.underConditions ?? result.value, result.unit)}` : ''
  return `[${escapeMarkdown(`${sizing.number}: ${sizing.titleBlock.title}${figure}`)}](${sizing.link})`
}

/** Underscores stay where they stand within a word, as in f_c: CommonMark takes them as they are there. */
const escapeMarkdown = (text: string) => text.replace(/[\\[\]`*<&]|(?<!\w)_|_(?!\w)/g, '\\$&')

/** An instant in the person's own zone, to the minute: `2026-12-01 14:26 CET`. */
export const localTime = (instant: string, zone?: string): string =>
  new Date(instant).toLocaleString('sv-SE', {
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
    hour: '2-digit',
    minute: '2-digit',
    timeZoneName: 'short',
    ...(zone !== undefined && { timeZone: zone }),
  })
