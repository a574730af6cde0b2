import { expect } from 'vitest'

interface Tolerance {
  relative?: number
  absolute?: number
}

const close = (got: number, wanted: number, { relative = 0, absolute = 0 }: Tolerance) =>
  Math.abs(got - wanted) <= relative * Math.abs(wanted) + absolute

expect.extend({
  /** Holds a number or a vector against outside figures: |got − wanted| ≤ relative·|wanted| + absolute. */
  toAgreeWith(received: number | ArrayLike<number>, wanted: number | ArrayLike<number>, tolerance: Tolerance) {
    const got = typeof received === 'number' ? [received] : Array.from(received ?? [])
    const want = typeof wanted === 'number' ? [wanted] : Array.from(wanted)
    const bad = want.findIndex((w, i) => !close(got[i] ?? NaN, w, tolerance))
    return {
      pass: got.length === want.length && want.length > 0 && bad === -1,
      message: () =>
        got.length === want.length
          ? `entry ${bad}: ${got[bad]} against ${want[bad]}, tolerance ${JSON.stringify(tolerance)}`
          : `lengths differ: ${got.length} against ${want.length}`,
    }
  },
})

declare module 'vitest' {
  // eslint-disable-next-line @typescript-eslint/no-explicit-any -- as vitest itself declares it
  interface Matchers<T = any> {
    toAgreeWith(wanted: number | ArrayLike<number>, tolerance: Tolerance): T
  }
}
