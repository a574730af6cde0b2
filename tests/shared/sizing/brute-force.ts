import { stockValues } from '#shared/preferred-values/stock'
import type { SeriesName } from '#shared/preferred-values/series'
import type { Stage } from '#shared/stage/index'

/** Stock of one part of a stage, in another series when one is given. */
export function stockOf(stage: Stage, name: string, series?: SeriesName): number[] {
  const part = stage.parts.find((one) => one.name === name)!
  return stockValues(part.kind, series ?? part.series, part.from, part.to)
}

const off = (value: number, target: number) => Math.abs(value / target - 1)

/** Smallest worst error of f_c and K over every combination: f_c = 1/(2πRfCf), K = −Rf/Ri. */
export function bestInverting(stock: { Ri: number[]; Rf: number[]; Cf: number[] }, fc: number, k: number): number {
  let best = Infinity
  for (const rf of stock.Rf)
    for (const cf of stock.Cf) {
      const corner = off(1 / (2 * Math.PI * rf * cf), fc)
      if (corner >= best) continue
      for (const ri of stock.Ri) best = Math.min(best, Math.max(corner, off(-rf / ri, k)))
    }
  return best
}

/** Smallest worst error of f_0, Q and K of the multiple-feedback low-pass over every combination. */
export function bestMultipleFeedback(
  stock: Record<'R1' | 'R2' | 'R3' | 'C1' | 'C2', number[]>,
  f0: number,
  q: number,
  k: number,
) {
  let best = Infinity
  for (const r1 of stock.R1)
    for (const r2 of stock.R2) {
      const gain = off(-r2 / r1, k)
      if (gain >= best) continue
      for (const r3 of stock.R3)
        for (const c1 of stock.C1)
          for (const c2 of stock.C2) {
            const t = Math.sqrt(r2 * r3 * c1 * c2)
            const frequency = off(1 / (2 * Math.PI * t), f0)
            if (frequency >= best) continue
            best = Math.min(best, Math.max(gain, frequency, off(t / (c2 * (r2 + r3 + (r2 * r3) / r1)), q)))
          }
    }
  return best
}

/** Smallest worst error of f_0 and Q of the Sallen–Key low-pass of unity gain over every combination. */
export function bestSallenKey(stock: Record<'R1' | 'R2' | 'C1' | 'C2', number[]>, f0: number, q: number): number {
  let best = Infinity
  for (const r1 of stock.R1)
    for (const r2 of stock.R2)
      for (const c1 of stock.C1)
        for (const c2 of stock.C2) {
          const t = Math.sqrt(r1 * r2 * c1 * c2)
          const frequency = off(1 / (2 * Math.PI * t), f0)
          if (frequency >= best) continue
          best = Math.min(best, Math.max(frequency, off(t / (c2 * (r1 + r2)), q)))
        }
  return best
}

/** Smallest worst error of f_c = 1/(2πR1C1) and K = 1 + Rf/Rg: two questions of their own. */
export function bestNonInverting(stock: Record<'R1' | 'C1' | 'Rg' | 'Rf', number[]>, fc: number, k: number): number {
  let corner = Infinity
  for (const r of stock.R1) for (const c of stock.C1) corner = Math.min(corner, off(1 / (2 * Math.PI * r * c), fc))
  let gain = Infinity
  for (const rf of stock.Rf) for (const rg of stock.Rg) gain = Math.min(gain, off(1 + rf / rg, k))
  return Math.max(corner, gain)
}

/** Smallest worst error of f_1, f_2 and K_0 of the wide band-pass; the edges from the two time constants. */
export function bestWideBand(stock: Record<'Ri' | 'Ci' | 'Rf' | 'Cf', number[]>, f1: number, f2: number, k: number) {
  let best = Infinity
  for (const ri of stock.Ri)
    for (const ci of stock.Ci)
      for (const rf of stock.Rf)
        for (const cf of stock.Cf) {
          const gain = off((-rf * ci) / (ri * ci + rf * cf), k)
          if (gain >= best) continue
          const sum = 1 / (2 * Math.PI * ri * ci) + 1 / (2 * Math.PI * rf * cf)
          const root = Math.sqrt(sum * sum + 4 / ((2 * Math.PI) ** 2 * ri * ci * rf * cf))
          best = Math.min(best, Math.max(gain, off((root - sum) / 2, f1), off((root + sum) / 2, f2)))
        }
  return best
}
