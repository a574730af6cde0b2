const EPSILON = Number.EPSILON
const GOLDEN = (3 - Math.sqrt(5)) / 2

/**
 * Root of a continuous function between two points where it has different signs.
 *
 * @param of the function
 * @param from one end of the bracket
 * @param to the other end
 * @param tolerance absolute, in the argument; 0 gives the last digits of a double
 * @returns the root; NaN when both ends have the same sign
 * Source: R. P. Brent, Algorithms for Minimization Without Derivatives (1973), chapter 4, procedure zero.
 */
export function bracketedRoot(of: (x: number) => number, from: number, to: number, tolerance = 0): number {
  let a = from
  let b = to
  let fa = of(a)
  let fb = of(b)
  if (fa === 0) return a
  if (fb === 0) return b
  if (!(fa > 0 !== fb > 0) || Number.isNaN(fa) || Number.isNaN(fb)) return NaN
  let c = a
  let fc = fa
  let step = b - a
  let before = step
  for (let round = 0; round < 200; round++) {
    if (fb > 0 === fc > 0) {
      c = a
      fc = fa
      step = before = b - a
    }
    if (Math.abs(fc) < Math.abs(fb)) {
      a = b
      b = c
      c = a
      fa = fb
      fb = fc
      fc = fa
    }
    const least = 2 * EPSILON * Math.abs(b) + tolerance / 2
    const half = (c - b) / 2
    if (Math.abs(half) <= least || fb === 0) return b
    if (Math.abs(before) < least || Math.abs(fa) <= Math.abs(fb)) step = before = half
    else {
      const s = fb / fa
      let p: number
      let q: number
      if (a === c) {
        p = 2 * half * s
        q = 1 - s
      } else {
        const t = fa / fc
        const r = fb / fc
        p = s * (2 * half * t * (t - r) - (b - a) * (r - 1))
        q = (t - 1) * (r - 1) * (s - 1)
      }
      if (p > 0) q = -q
      else p = -p
      if (2 * p < Math.min(3 * half * q - Math.abs(least * q), Math.abs(before * q))) {
        before = step
        step = p / q
      } else step = before = half
    }
    a = b
    fa = fb
    b += Math.abs(step) > least ? step : half > 0 ? least : -least
    fb = of(b)
  }
  return b
}

/**
 * Minimum of a function with one minimum between two points. A minimum is flat, so that its place is known to about
 * the root of the relative precision of the function.
 *
 * @param tolerance absolute, in the argument
 * @returns where the minimum lies, and the value there
 * Source: R. P. Brent, Algorithms for Minimization Without Derivatives (1973), chapter 5, procedure localmin.
 */
export function bracketedMinimum(
  of: (x: number) => number,
  from: number,
  to: number,
  tolerance = 0,
): { at: number; value: number } {
  let a = Math.min(from, to)
  let b = Math.max(from, to)
  let x = a + GOLDEN * (b - a)
  let w = x
  let v = x
  let fx = of(x)
  let fw = fx
  let fv = fx
  let step = 0
  let before = 0
  for (let round = 0; round < 200; round++) {
    const middle = (a + b) / 2
    const least = Math.sqrt(EPSILON) * Math.abs(x) * 0.1 + tolerance / 3 + Number.MIN_VALUE
    if (Math.abs(x - middle) <= 2 * least - (b - a) / 2) break
    const r = (x - w) * (fx - fv)
    let q = (x - v) * (fx - fw)
    let p = (x - v) * q - (x - w) * r
    q = 2 * (q - r)
    if (q > 0) p = -p
    else q = -q
    const last = before
    before = step
    if (Math.abs(before) > least && Math.abs(p) < Math.abs((q * last) / 2) && p > q * (a - x) && p < q * (b - x)) {
      step = p / q
      const u = x + step
      if (u - a < 2 * least || b - u < 2 * least) step = x < middle ? least : -least
    } else {
      before = x < middle ? b - x : a - x
      step = GOLDEN * before
    }
    const u = Math.abs(step) >= least ? x + step : x + (step > 0 ? least : -least)
    const fu = of(u)
    if (fu <= fx) {
      if (u < x) b = x
      else a = x
      v = w
      fv = fw
      w = x
      fw = fx
      x = u
      fx = fu
    } else {
      if (u < x) a = u
      else b = u
      if (fu <= fw || w === x) {
        v = w
        fv = fw
        w = u
        fw = fu
      } else if (fu <= fv || v === x || v === w) {
        v = u
        fv = fu
      }
    }
  }
  return { at: x, value: fx }
}
