import type { NetElement, OpampElement } from '../../circuit/netlist/netlist'
import type { Complex } from '../../numerics/complex'
import { divide } from '../../numerics/polynomial'
import type { Problem } from '../../problems'
import { ProblemError } from '../../problems'

/**
 * What is known of a real op-amp for signals and noise. Whatever is left out is ideal: gain and bandwidth without end,
 * no further pole, no output resistance, no input capacitance, no noise.
 *
 *     A(s) = A0 / ((1 + s·A0/(2π·GBW))·(1 + s/(2π·f2)))
 */
export interface Amplifier {
  /** A0, open-loop gain at 0 Hz, V/V. */
  openLoopGain?: number | undefined
  /** GBW, product of gain and frequency where the gain falls by 20 dB a decade, Hz. */
  gbwHz?: number | undefined
  /** f2, second pole of the open-loop gain, Hz. */
  secondPoleHz?: number | undefined
  /** R_o, between the amplifier's inner source and its output pin, ohm. */
  outputOhm?: number | undefined
  /** C_in, between the two input pins, farad. */
  inputFarad?: number | undefined
  /** e_n, white, in series with the non-inverting input, V/√Hz. */
  noiseVoltPerRtHz?: number | undefined
  /** i_n, white, from each input to ground, A/√Hz. */
  noiseAmpPerRtHz?: number | undefined
  /** Below this frequency e_n grows as 1/√f, Hz; 0 for white. */
  noiseVoltCornerHz?: number | undefined
  /** Below this frequency i_n grows as 1/√f, Hz; 0 for white. */
  noiseAmpCornerHz?: number | undefined
}

/** Real op-amps by designator; an op-amp that is not among them is ideal. */
export type Amplifiers = Readonly<Record<string, Amplifier>>

const ABOVE_ZERO = ['openLoopGain', 'gbwHz', 'secondPoleHz'] as const
const FROM_ZERO = [
  'outputOhm',
  'inputFarad',
  'noiseVoltPerRtHz',
  'noiseAmpPerRtHz',
  'noiseVoltCornerHz',
  'noiseAmpCornerHz',
] as const

/** The record of an op-amp, if it has one. */
export const amplifierOf = (amplifiers: Amplifiers, { ref }: OpampElement): Amplifier | undefined =>
  Object.hasOwn(amplifiers, ref) ? amplifiers[ref] : undefined

/** 1/A(s) as (perGain + s·perRate)·(1 + s·secondSec); all 0 for an ideal op-amp. */
export function inverseGain({ openLoopGain, gbwHz, secondPoleHz }: Amplifier): {
  perGain: number
  perRate: number
  secondSec: number
} {
  return {
    perGain: openLoopGain === undefined ? 0 : 1 / openLoopGain,
    perRate: gbwHz === undefined ? 0 : 1 / (2 * Math.PI * gbwHz),
    secondSec: secondPoleHz === undefined ? 0 : 1 / (2 * Math.PI * secondPoleHz),
  }
}

/** Whether the inputs of an op-amp are at one voltage whatever it drives: gain without end at every frequency. */
export const isNullor = (amplifier: Amplifier | undefined): boolean => {
  if (!amplifier) return true
  const { perGain, perRate } = inverseGain(amplifier)
  return perGain === 0 && perRate === 0
}

/**
 * A(j2πf), open-loop gain of an op-amp.
 * @param frequencyHz Hz, ≥ 0
 * @returns V/V; infinite where the op-amp is ideal
 */
export function openLoopGainAt(amplifier: Amplifier, frequencyHz: number): Complex {
  const { perGain, perRate, secondSec } = inverseGain(amplifier)
  const w = 2 * Math.PI * frequencyHz
  const below = { re: perGain - w * w * perRate * secondSec, im: w * (perRate + perGain * secondSec) }
  if (below.re === 0 && below.im === 0) return { re: Infinity, im: 0 }
  return divide({ re: 1, im: 0 }, below)
}

/**
 * Refuses records of op-amps that the circuit does not have, and figures that no op-amp has.
 * @throws {ProblemError} 'part-unknown', 'value-out-of-range', all problems at once
 */
export function requireAmplifiers(amplifiers: Amplifiers, elements: readonly NetElement[]): void {
  const opamps = elements.flatMap((element) => (element.kind === 'opamp' ? [element.ref] : []))
  const problems = Object.entries(amplifiers).flatMap(([ref, amplifier]): Problem[] => {
    const pointer = `#/amplifiers/${ref}`
    if (!opamps.includes(ref)) {
      const known = opamps.length ? `its op-amps are ${opamps.join(', ')}` : 'it has none'
      return [{ code: 'part-unknown', detail: `No op-amp is called ${ref} in this circuit; ${known}.`, pointer }]
    }
    const wrong = (key: keyof Amplifier, needs: string): Problem => ({
      code: 'value-out-of-range',
      detail: `${key} of ${ref} is ${amplifier[key]}; it takes a number ${needs}.`,
      pointer: `${pointer}/${key}`,
    })
    return [
      ...ABOVE_ZERO.filter((key) => amplifier[key] !== undefined && !(amplifier[key] > 0)).map((key) =>
        wrong(key, 'above zero'),
      ),
      ...FROM_ZERO.filter(
        (key) => amplifier[key] !== undefined && !(amplifier[key] >= 0 && amplifier[key] < Infinity),
      ).map((key) => wrong(key, 'from zero up')),
    ]
  })
  const [first, ...more] = problems
  if (first) throw new ProblemError(first.code, first.detail, { pointer: first.pointer! }, more)
}
