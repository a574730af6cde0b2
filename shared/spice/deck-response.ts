import { prepareCircuit, response } from '../analysis/nodal-analysis'
import type { Amplifiers } from '../analysis/op-amp/amplifier'
import type { ComplexArray } from '../numerics/complex'
import { complexArray } from '../numerics/complex'
import type { Deck, DeckPorts } from './deck'
import { liveSources, netlistOfDeck } from './deck'

/**
 * Voltage at an output of a deck, its sources each with magnitude and phase, by superposition; or for 1 V at the input
 * that is named.
 * @param frequenciesHz Hz, ≥ 0
 * @param amplifiers real op-amps by designator
 * @returns volt, shape [n]
 * @throws {ProblemError} as netlistOfDeck and response
 */
export function deckResponse(
  deck: Deck,
  ports: Pick<DeckPorts, 'input' | 'output'>,
  frequenciesHz: ArrayLike<number>,
  amplifiers: Amplifiers = {},
): ComplexArray {
  const live = ports.input === undefined ? liveSources(deck) : []
  if (live.length === 0)
    return response(prepareCircuit(netlistOfDeck(deck, ports), { amplifiers }), deck.values, frequenciesHz)
  const sum = complexArray(frequenciesHz.length)
  for (const { ref, acVolt, acPhaseRad } of live) {
    const prepared = prepareCircuit(netlistOfDeck(deck, { ...ports, source: ref }), { amplifiers })
    const one = response(prepared, deck.values, frequenciesHz)
    const [re, im] = [acVolt * Math.cos(acPhaseRad), acVolt * Math.sin(acPhaseRad)]
    for (let k = 0; k < frequenciesHz.length; k++) {
      sum.re[k]! += re * one.re[k]! - im * one.im[k]!
      sum.im[k]! += re * one.im[k]! + im * one.re[k]!
    }
  }
  return sum
}
