const FLOOR_DB = -40

/**
 * The line of a small response sketch.
 *
 * @param magnitudeDb |H| in dB at evenly spaced log frequencies; the highest stands at the top, 40 dB less at the foot
 * @param width of the sketch, px
 * @param height of the sketch, px
 * @returns SVG path data, empty without figures
 */
export function sketchPath(magnitudeDb: readonly number[], width: number, height: number): string {
  const told = magnitudeDb.filter(Number.isFinite)
  if (told.length < 2) return ''
  const top = Math.max(...told)
  const last = magnitudeDb.length - 1
  const points = magnitudeDb.map((db, index) => {
    const below = Number.isFinite(db) ? Math.max(db - top, FLOOR_DB) : FLOOR_DB
    return `${round((index / last) * width)} ${round((below / FLOOR_DB) * height)}`
  })
  return `M${points.join('L')}`
}

const round = (px: number): number => Math.round(px * 10) / 10
