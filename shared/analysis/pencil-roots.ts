import type { Complex } from '../numerics/complex'
import { aberthStep, conjugatePairs, divide, polynomialRoots } from '../numerics/polynomial'
import type { Degrees } from './exact-degree'
import type { Pencil } from './pencil'
import { PencilSolver } from './pencil'

const MAX_ROUNDS = 80
const SETTLED = 1e-13
/** Roots nearer than this (relative) are found together, as a cluster. */
const CLUSTER = 1e-4
const CONTOUR_POINTS = 32
/** Roots nearer to an axis than this (relative) lie on it. */
const ON_AXIS = 1e-11

/**
 * The s at which G + sC is singular: poles or zeros of a circuit. Newton's method on the determinant, all roots at
 * once, on the sparse matrix itself: no polynomial coefficients, whose rounding would move the roots. Simple roots come
 * out to about 1e-13; copies of a multiple root are equal.
 *
 * @param degrees exact degree of the determinant and multiplicity of its root at 0
 * @param rateRadPerSec where the search starts, rad/s
 * @returns roots, rad/s, those at 0 first; real ones exactly real, others in conjugate pairs
 * Source: D. A. Bini, V. Noferini, Linear Algebra Appl. 439 (2013) 1130 (Ehrlich–Aberth for matrices); clusters: L. M.
 * Delves, J. N. Lyness, Math. Comp. 21 (1967) 543.
 */
export function pencilRoots(pencil: Pencil, { degree, atOrigin }: Degrees, rateRadPerSec: number): Complex[] {
  const origin = Array.from({ length: Math.max(atOrigin, 0) }, () => ({ re: 0, im: 0 }))
  const count = degree - atOrigin
  if (degree < 1 || count < 1) return origin
  const solver = new PencilSolver(pencil)
  /** d ln det/ds without the roots at 0; null at a root. */
  const logDerivative = (s: Complex): Complex | null => {
    if (!solver.at(s.re, s.im)) return null
    const whole = solver.logDerivative()
    if (atOrigin === 0) return whole
    const own = divide({ re: atOrigin, im: 0 }, s)
    return { re: whole.re - own.re, im: whole.im - own.im }
  }
  const roots = startingPoints(logDerivative, count, rateRadPerSec)
  iterate(logDerivative, roots)
  separateClusters(logDerivative, roots)
  return [...origin, ...conjugatePairs(roots, ON_AXIS).map(ontoAxis)]
}

type LogDerivative = (s: Complex) => Complex | null

/**
 * Re(jr · d ln det/ds at jr) counts the roots that are smaller than r; the k-th root starts where the count passes k − ½.
 */
function startingPoints(logDerivative: LogDerivative, count: number, rate: number): Complex[] {
  const counted = (exponent: number) => {
    const radius = rate * 10 ** exponent
    const d = logDerivative({ re: 0, im: radius })
    return d ? -radius * d.im : count / 2
  }
  const samples: { exponent: number; below: number }[] = []
  for (let exponent = -1; exponent > -24; exponent--) {
    samples.unshift({ exponent, below: counted(exponent) })
    if (Math.abs(samples[0]!.below) < 0.1) break
  }
  for (let exponent = 0; exponent < 24; exponent++) {
    samples.push({ exponent, below: counted(exponent) })
    if (Math.abs(samples.at(-1)!.below - count) < 0.1) break
  }
  return Array.from({ length: count }, (_, k) => {
    const wanted = k + 0.5
    const after = samples.findIndex(({ below }) => below >= wanted)
    const to = samples[after < 0 ? samples.length - 1 : after]!
    const from = samples[Math.max(0, (after < 0 ? samples.length - 1 : after) - 1)]!
    const share = to.below > from.below ? (wanted - from.below) / (to.below - from.below) : 0.5
    const exponent = from.exponent + (to.exponent - from.exponent) * Math.min(1, Math.max(0, share))
    const radius = rate * 10 ** exponent
    const angle = 2.4 * k + 1.9
    return { re: radius * Math.cos(angle), im: radius * Math.sin(angle) }
  })
}

function iterate(logDerivative: LogDerivative, roots: Complex[]): void {
  const settled = roots.map(() => false)
  const last = roots.map(() => Infinity)
  for (let round = 0; round < MAX_ROUNDS && settled.includes(false); round++)
    roots.forEach((root, i) => {
      if (settled[i]) return
      const d = logDerivative(root)
      const step = d && aberthStep(divide({ re: 1, im: 0 }, d), roots, i)
      if (!step || !Number.isFinite(step.re + step.im)) {
        settled[i] = true
        return
      }
      root.re -= step.re
      root.im -= step.im
      const size = Math.hypot(step.re, step.im) / Math.hypot(root.re, root.im)
      // Near copies of a multiple root the steps end in rounding noise: no gain in going on.
      settled[i] = !(size > SETTLED) || (size < 1e-5 && size > 0.7 * last[i]!)
      last[i] = size
    })
}

/** Finds the roots of each cluster again from contour integrals around it, which see them all at full precision. */
function separateClusters(logDerivative: LogDerivative, roots: Complex[]): void {
  const taken = new Set<number>()
  roots.forEach((_, first) => {
    if (taken.has(first)) return
    const group = [first]
    for (let g = 0; g < group.length; g++)
      roots.forEach((root, i) => {
        const gap = distance(root, roots[group[g]!]!)
        if (!group.includes(i) && gap < CLUSTER * Math.hypot(root.re, root.im)) group.push(i)
      })
    group.forEach((i) => taken.add(i))
    if (group.length < 2) return
    const found = resolved(
      logDerivative,
      group.map((i) => roots[i]!),
      roots.filter((_, i) => !group.includes(i)),
    )
    found?.forEach((root, k) => (roots[group[k]!] = root))
  })
}

function resolved(logDerivative: LogDerivative, group: Complex[], others: Complex[]): Complex[] | null {
  const m = group.length
  const centre = { re: 0, im: 0 }
  for (const { re, im } of group) {
    centre.re += re / m
    centre.im += im / m
  }
  if (Math.abs(centre.im) < 1e-6 * Math.abs(centre.re)) centre.im = 0
  const spread = Math.max(...group.map((root) => distance(root, centre)))
  const nearest = Math.min(...others.map((root) => distance(root, centre)), Math.hypot(centre.re, centre.im))
  const radius = Math.min(0.25 * nearest, 0.05 * Math.hypot(centre.re, centre.im))
  if (!(radius > 4 * spread)) return null
  const sums = Array.from({ length: m + 1 }, () => ({ re: 0, im: 0 }))
  for (let k = 0; k < CONTOUR_POINTS; k++) {
    const angle = (2 * Math.PI * (k + 0.5)) / CONTOUR_POINTS
    const d = logDerivative({ re: centre.re + radius * Math.cos(angle), im: centre.im + radius * Math.sin(angle) })
    if (!d) return null
    for (let power = 0; power <= m; power++) {
      const [c, s] = [Math.cos(angle * (power + 1)), Math.sin(angle * (power + 1))]
      sums[power]!.re += ((c * d.re - s * d.im) * radius) / CONTOUR_POINTS
      sums[power]!.im += ((c * d.im + s * d.re) * radius) / CONTOUR_POINTS
    }
  }
  if (Math.abs(sums[0]!.re - m) > 1e-3) return null
  const mean = { re: sums[1]!.re / m, im: sums[1]!.im / m }
  const middle = { re: centre.re + radius * mean.re, im: centre.im === 0 ? 0 : centre.im + radius * mean.im }
  return fromPowerSums(sums, mean, m).map(({ re, im }) => ({
    re: middle.re + radius * re,
    im: middle.im + radius * im,
  }))
}

/** Offsets of the roots from their mean, in radii of the contour. Of two roots exactly; of more, as copies or as real. */
function fromPowerSums(sums: Complex[], mean: Complex, m: number): Complex[] {
  const second = {
    re: sums[2]!.re - m * (mean.re * mean.re - mean.im * mean.im),
    im: sums[2]!.im - 2 * m * mean.re * mean.im,
  }
  const copies = Array.from({ length: m }, () => ({ re: 0, im: 0 }))
  if (Math.hypot(second.re, second.im) < 1e-12) return copies
  if (m > 2) return mean.im === 0 ? realOffsets(sums, mean.re, m) : copies
  const offset = squareRoot({ re: second.re / 2, im: second.im / 2 })
  return [offset, { re: -offset.re, im: -offset.im }]
}

/** Newton's identities, then the roots of the small polynomial. */
function realOffsets(sums: Complex[], mean: number, m: number): Complex[] {
  const elementary = [1]
  for (let k = 1; k <= m; k++) {
    let e = 0
    for (let i = 1; i <= k; i++) e += (i % 2 === 1 ? 1 : -1) * elementary[k - i]! * sums[i]!.re
    elementary.push(e / k)
  }
  return polynomialRoots(elementary.map((e, k) => (k % 2 === 1 ? -e : e))).map(({ re, im }) => ({ re: re - mean, im }))
}

function squareRoot({ re, im }: Complex): Complex {
  const size = Math.hypot(re, im)
  const real = Math.sqrt((size + Math.abs(re)) / 2)
  const other = real === 0 ? 0 : Math.abs(im) / (2 * real)
  return re >= 0 ? { re: real, im: im < 0 ? -other : other } : { re: other, im: im < 0 ? -real : real }
}

const distance = (a: Complex, b: Complex) => Math.hypot(a.re - b.re, a.im - b.im)

const ontoAxis = (root: Complex): Complex =>
  Math.abs(root.re) <= ON_AXIS * Math.abs(root.im) ? { re: 0, im: root.im } : root
