import type { Draws } from './draw'
import type { Share } from './wilson'

const THIN_SPACE = '\u2009'

const DISTRIBUTION_WORDS: Record<Draws['distribution'], string> = {
  uniform: 'uniform within tolerance',
  normal: 'normal with tolerance = 3σ, cut there',
}

/**
 * How the builds were drawn, for every sentence about yield.
 * @example drawsWords({ distribution: 'uniform', builds: 10000, seed: 7 }) // '10 000 builds, uniform within tolerance, seed 7'
 */
export const drawsWords = ({ distribution, builds, seed }: Draws): string =>
  `${grouped(builds)} ${builds === 1 ? 'build' : 'builds'}, ${DISTRIBUTION_WORDS[distribution]}, seed ${seed}`

/** The yield as a sentence, with distribution, builds, seed and confidence. */
export function yieldSentence(share: Share, draws: Draws): string {
  const { fraction, lower, upper } = share
  return (
    `${percent(fraction)} of the builds keep all limits, between ${percent(lower, 'down')} and ${percent(upper, 'up')} ` +
    `with 95${THIN_SPACE}% confidence (Wilson 1927; ${drawsWords(draws)}).`
  )
}

/** Bounds are rounded outwards, and a yield is never rounded up to all or down to none. */
function percent(fraction: number, way?: 'down' | 'up'): string {
  const hundredths = fraction * 10_000
  const round = way === 'down' ? Math.floor : way === 'up' ? Math.ceil : Math.round
  let shown = round(hundredths)
  if (way === undefined && fraction < 1) shown = Math.min(shown, 9999)
  if (way === undefined && fraction > 0) shown = Math.max(shown, 1)
  return `${(shown / 100).toFixed(2)}${THIN_SPACE}%`
}

const grouped = (whole: number) => String(whole).replace(/\B(?=(\d{3})+$)/g, THIN_SPACE)
