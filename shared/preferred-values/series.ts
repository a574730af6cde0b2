export const SERIES_NAMES = ['E3', 'E6', 'E12', 'E24', 'E48', 'E96', 'E192'] as const
export type SeriesName = (typeof SERIES_NAMES)[number]

const E24 = [10, 11, 12, 13, 15, 16, 18, 20, 22, 24, 27, 30, 33, 36, 39, 43, 47, 51, 56, 62, 68, 75, 82, 91]
const every = (step: number) => E24.filter((_, k) => k % step === 0)

/** 10^(k/n) to three digits, with the one exception that the standard prints: 9.20 in E192, where the rule gives 9.19. */
const byRule = (n: number) =>
  Array.from({ length: n }, (_, k) => Math.round(100 * 10 ** (k / n))).map((v) => (v === 919 ? 920 : v))

/** Significant digits of one decade as whole numbers: tens for E3–E24, hundreds for E48–E192. */
export const SERIES_DIGITS: Record<SeriesName, { digits: number[]; decade: number }> = {
  E3: { digits: every(8), decade: 1 },
  E6: { digits: every(4), decade: 1 },
  E12: { digits: every(2), decade: 1 },
  E24: { digits: E24, decade: 1 },
  E48: { digits: byRule(48), decade: 2 },
  E96: { digits: byRule(96), decade: 2 },
  E192: { digits: byRule(192), decade: 2 },
}

/**
 * Preferred numbers of one decade, 1 ≤ v < 10, ascending.
 * Source: IEC 60063:2015.
 */
export const SERIES: Record<SeriesName, number[]> = Object.fromEntries(
  SERIES_NAMES.map((name) => [
    name,
    SERIES_DIGITS[name].digits.map((d) => Number(`${d}e-${SERIES_DIGITS[name].decade}`)),
  ]),
) as Record<SeriesName, number[]>
