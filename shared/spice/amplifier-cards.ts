import type { Amplifier } from '../analysis/op-amp/amplifier'
import { isNullor } from '../analysis/op-amp/amplifier'
import type { SafeNames } from './names'

/** Gain that stands for an ideal op-amp. */
const IDEAL_GAIN = '1e9'
/** Most gain of a model with a pole, below what is taken for an ideal op-amp when the deck is read. */
const GAIN_MAX = 9e8
/** Resistance of a model's RC; its noise is switched off. */
const MODEL_OHM = 1e3

/** Where an op-amp stands, in the words of the deck. */
export interface AmplifierPlace {
  ref: string
  plus: string
  minus: string
  out: string
}

/**
 * Cards of an op-amp. Ideal, one source of gain 1e9; with a record, for U1: EU1A of gain A0 (9e8 at most, and when none is given),
 * RU1P and CU1P for the pole, RU1Q and CU1Q behind EU1S for the second pole, EU1B as buffer, RU1O for the output
 * resistance, CU1I for the input capacitance. The model's resistors make no noise; noise records are not written.
 *
 *     A(s) = A0 / ((1 + s·A0/(2π·GBW))·(1 + s/(2π·f2)))
 */
export function amplifierCards(
  { ref, plus, minus, out }: AmplifierPlace,
  amplifier: Amplifier | undefined,
  nodes: SafeNames,
  refs: SafeNames,
): string[] {
  const card = (letter: string, mark: string) => refs.free(`${letter}${ref}${mark}`)
  const input = amplifier?.inputFarad ? [`${card('C', 'I')} ${plus} ${minus} ${amplifier.inputFarad}`] : []
  if (!amplifier || isNullor(amplifier)) return [`${card('E', '')} ${out} 0 ${plus} ${minus} ${IDEAL_GAIN}`, ...input]
  const { openLoopGain, gbwHz, secondPoleHz, outputOhm } = amplifier
  const finite = (value: number | undefined) => (value !== undefined && Number.isFinite(value) ? value : undefined)
  const gain = Math.min(finite(openLoopGain) ?? GAIN_MAX, GAIN_MAX)
  let at = nodes.free(`${ref}x`)
  const cards = [`${card('E', 'A')} ${at} 0 ${plus} ${minus} ${gain}`]
  const pole = (mark: string, farad: number) => {
    const behind = nodes.free(`${ref}${mark === 'P' ? 'y' : 'z'}`)
    cards.push(`${card('R', mark)} ${at} ${behind} ${MODEL_OHM} noisy=0`, `${card('C', mark)} ${behind} 0 ${farad}`)
    at = behind
  }
  const band = finite(gbwHz)
  if (band !== undefined) pole('P', gain / (2 * Math.PI * band * MODEL_OHM))
  const second = finite(secondPoleHz)
  if (second !== undefined) {
    const buffered = nodes.free(`${ref}w`)
    cards.push(`${card('E', 'S')} ${buffered} 0 ${at} 0 1`)
    at = buffered
    pole('Q', 1 / (2 * Math.PI * second * MODEL_OHM))
  }
  const inner = outputOhm ? nodes.free(`${ref}o`) : out
  cards.push(`${card('E', 'B')} ${inner} 0 ${at} 0 1`)
  if (outputOhm) cards.push(`${card('R', 'O')} ${inner} ${out} ${outputOhm} noisy=0`)
  return [...cards, ...input]
}
