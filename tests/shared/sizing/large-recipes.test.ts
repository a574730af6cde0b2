import { describe, expect, it } from 'vitest'
import { valueOf } from '#shared/problems'
import { readStage } from '#shared/stage/index'
import { evaluated } from '../../support/stages'

/** A row of RC sections, each part sized by itself: as many free picks and steps as asked. */
function rowOf(sections: number, freePicks: boolean) {
  const at = (k: number) => 1 + 5 * k
  const all = Array.from({ length: sections }, (_, k) => k)
  const circuit = [
    `input in ${at(0)},3`,
    ...all.flatMap((k) => [
      `R R${k} ${at(k)},3 ${at(k) + 5},3`,
      `C C${k} ${at(k) + 5},3 ${at(k) + 5},6`,
      `ground ${at(k) + 5},6`,
    ]),
    `output out ${at(sections)},3`,
  ].join('\n')
  const calculator = [
    'parts:',
    ...all.flatMap((k) => [`  R${k}: { default: 10k }`, `  C${k}: { default: 10n }`]),
    'results:',
    '  f_a: { formula: 1/(2*pi*R0*C0), unit: Hz, meaning: m }',
    `  t: { formula: "${all.map((k) => `R${k}*C${k}`).join(' + ')}", unit: s, meaning: sum of the time constants }`,
    'sizing:',
    '  targets: { f_a: 1 kHz, t: 1 ms }',
    ...(freePicks ? ['  free:', ...all.map((k) => `    C${k}: { start: 10n }`)] : []),
    '  steps:',
    ...all.flatMap((k) => [
      ...(freePicks ? [] : [`    - { part: C${k}, formula: 10n }`]),
      `    - { part: R${k}, formula: "1/(2*pi*f_a*C${k})" }`,
    ]),
  ].join('\n')
  return valueOf(readStage({ circuit, calculator }))
}

describe('a recipe of many parts', () => {
  it.each([
    [6, true],
    [20, true],
    [20, false],
  ])('of %d sections, capacitors free: %s, is sized in bounded time', (sections, freePicks) => {
    const stage = rowOf(sections, freePicks)
    const from = performance.now()
    const { parts, results } = evaluated(stage, { targets: { f_a: 1000, t: sections * 1.6e-4 } })
    expect(performance.now() - from).toBeLessThan(6000)
    expect(parts['R0']!.state).toBe('solved')
    for (const name of ['f_a', 't']) expect(Math.abs(results[name]!.relativeError!)).toBeLessThan(0.02)
  })
})
