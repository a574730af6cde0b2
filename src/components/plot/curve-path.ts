import { acrossOf, type PlotScale } from './plot-scale'

/** Largest distance outside the frame that a curve is drawn to, in frames: it leaves the frame at the right slope. */
const BEYOND = 3

/**
 * A curve as path data inside a frame.
 * @param top value at the upper edge, in the unit of the values
 */
export function curvePath(
  scale: PlotScale,
  inner: { width: number; height: number },
  frequenciesHz: readonly number[],
  values: readonly number[],
  top: number,
  bottom: number,
): string {
  let path = ''
  let isDown = false
  for (let k = 0; k < frequenciesHz.length; k++) {
    const down = (top - values[k]!) / (top - bottom)
    if (Number.isNaN(down)) {
      isDown = false
      continue
    }
    const x = inner.width * acrossOf(scale, frequenciesHz[k]!)
    const y = inner.height * Math.min(BEYOND, Math.max(-BEYOND, down))
    path += `${isDown ? 'L' : 'M'}${x.toFixed(1)} ${y.toFixed(1)}`
    isDown = true
  }
  return path
}
