import type { PlotScale } from '../plot/plot-scale'

const EXCESS = 1 + 1e-9

/** The decades within a scale, with their labels. */
export function decadeTicks({ fromHz, toHz }: PlotScale): { hertz: number; label: string }[] {
  const first = Math.ceil(Math.log10(fromHz) - 1e-9)
  const last = Math.floor(Math.log10(toHz) + 1e-9)
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, k) => ({
    hertz: 10 ** (first + k),
    label: decadeWords(first + k),
  }))
}

/** 2 to 9 of each decade within a scale, Hz. */
export function minorTicks({ fromHz, toHz }: PlotScale): number[] {
  const first = Math.floor(Math.log10(fromHz))
  const count = Math.ceil(Math.log10(toHz / fromHz)) + 1
  return Array.from({ length: count }, (_, k) => 10 ** (first + k))
    .flatMap((decade) => [2, 3, 4, 5, 6, 7, 8, 9].map((digit) => digit * decade))
    .filter((hertz) => hertz * EXCESS > fromHz && hertz < toHz * EXCESS)
}

/** A curve as an SVG path, broken where there is no figure. */
export function curvePath(
  frequenciesHz: readonly number[],
  figures: readonly number[],
  x: (hertz: number) => number,
  y: (figure: number) => number,
): string {
  let path = ''
  let isOn = false
  frequenciesHz.forEach((hertz, k) => {
    const place = y(figures[k] ?? NaN)
    const isThere = Number.isFinite(place)
    if (isThere) path += `${isOn ? 'L' : 'M'}${x(hertz).toFixed(1)} ${place.toFixed(1)}`
    isOn = isThere
  })
  return path
}

/** A number with a true minus. */
export const signedText = (value: number): string => String(value).replace('-', '\u2212')

const PREFIXES: Record<number, string> = { [-2]: 'µ', [-1]: 'm', 0: '', 1: 'k', 2: 'M', 3: 'G', 4: 'T' }

/** A power of ten at an axis: 10 k for 4. */
export function decadeWords(power: number): string {
  const step = Math.floor(power / 3)
  const prefix = PREFIXES[step]
  return prefix === undefined ? '' : `${10 ** (power - 3 * step)}${prefix && `\u2009${prefix}`}`
}
