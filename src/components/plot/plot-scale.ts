/** Axes of a response plot: dB at the left, degrees at the right, with the same number of steps. */
export interface PlotScale {
  fromHz: number
  toHz: number
  topDb: number
  bottomDb: number
  topDegrees: number
  bottomDegrees: number
  steps: number
}

const STEPS = 4

/**
 * Scale of a response: the range of frequencies, 20 dB and 45° steps, so that it rests while values change a little.
 * @param range lowest and highest frequency shown, Hz
 */
export function plotScale(
  [fromHz, toHz]: readonly [number, number],
  magnitudeDb: readonly number[],
  phaseDegrees: readonly number[],
): PlotScale {
  const finite = magnitudeDb.filter(Number.isFinite)
  const peak = finite.length ? Math.max(...finite) : 0
  const topDb = 20 * Math.ceil((peak + 0.5) / 20)
  const phases = phaseDegrees.filter(Number.isFinite)
  const [least, most] = phases.length ? [Math.min(...phases), Math.max(...phases)] : [-180, 0]
  const unit =
    [45, 90, 180, 360].find((step) => Math.ceil((most - 0.01) / step) * step - STEPS * step <= least + 0.01) ?? 720
  const topDegrees = Math.ceil((most - 0.01) / unit) * unit
  return {
    fromHz,
    toHz,
    topDb,
    bottomDb: topDb - 20 * STEPS,
    topDegrees,
    bottomDegrees: topDegrees - unit * STEPS,
    steps: STEPS,
  }
}

/** Margins between the frame and the axes, px. */
export const PLOT_MARGIN = { left: 46, right: 46, top: 12, bottom: 34 }

/** Place of a frequency across the frame, 0 to 1. */
export const acrossOf = (scale: PlotScale, hertz: number) =>
  Math.log(hertz / scale.fromHz) / Math.log(scale.toHz / scale.fromHz)

export const frequencyAt = (scale: PlotScale, across: number) => scale.fromHz * (scale.toHz / scale.fromHz) ** across

/** Place of a level down the frame, 0 to 1. */
export const downOf = (top: number, bottom: number, value: number) =>
  Math.min(1, Math.max(0, (top - value) / (top - bottom)))
