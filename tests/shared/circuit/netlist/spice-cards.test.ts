import { expect, it } from 'vitest'
import { spiceCards } from '#shared/circuit/netlist/spice-cards'
import { ProblemError } from '#shared/problems'
import { CHECK_CIRCUITS, netlistOfCheck, readCheck } from '../../../support/circuits'

// Source: the `netlist.ideal` cards of tests/checks/circuits, as ngspice-39 ran them.
it.each(CHECK_CIRCUITS)('writes the cards of %s', (name) => {
  const { netlist, parts } = readCheck(name)
  const split = (cards: string[]) =>
    cards.map((card) => {
      const words = card.split(/\s+/)
      return [...words.slice(0, -1), Number(words.at(-1))]
    })
  expect(split(spiceCards(netlistOfCheck(name), parts))).toEqual(split(netlist.ideal))
})

it('holds references and supplies by sources of 0 V', () => {
  const netlist = { ...netlistOfCheck('lp1-inverting'), signalGrounds: ['V+', 'V-'] }
  expect(spiceCards(netlist, readCheck('lp1-inverting').parts).slice(-2)).toEqual([
    'Vground1 V+ 0 0',
    'Vground2 V- 0 0',
  ])
})

it('names the part that has no value', () => {
  expect(() => spiceCards(netlistOfCheck('lp1-inverting'), { Ri: 1e4, Cf: 1e-9 })).toThrow(ProblemError)
  expect(() => spiceCards(netlistOfCheck('lp1-inverting'), { Ri: 1e4, Cf: 1e-9 })).toThrow('Rf has no value.')
})
