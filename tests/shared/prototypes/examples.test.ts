import { expect, it } from 'vitest'
import { bessel } from '#shared/prototypes/bessel'
import { butterworth } from '#shared/prototypes/butterworth'
import { chebyshev1 } from '#shared/prototypes/chebyshev1'
import { chebyshev2 } from '#shared/prototypes/chebyshev2'
import { elliptic } from '#shared/prototypes/elliptic'
import {
  arithmeticGeometricMean,
  incompleteIntegral,
  jacobi,
  modulusByDegree,
  modulusOf,
  quarterPeriod,
} from '#shared/prototypes/elliptic-functions'
import { linkwitzRiley } from '#shared/prototypes/linkwitz-riley'
import { minimumOrder } from '#shared/prototypes/order'
import { lowPassPrototype } from '#shared/prototypes/prototype'
import { sectionsOf } from '#shared/prototypes/sections'

it('gives what the examples of the docstrings say', () => {
  expect(butterworth(2).poles[0]!.re).toAgreeWith(-0.7071, { absolute: 5e-5 })
  expect(butterworth(2).poles[0]!.im).toAgreeWith(0.7071, { absolute: 5e-5 })
  expect(chebyshev1(1, 3).poles[0]!.re).toAgreeWith(-1.0024, { absolute: 5e-5 })
  expect(chebyshev2(2, 40).zeros[0]!.im).toAgreeWith(1.4142, { absolute: 5e-5 })
  expect(bessel(2).poles[0]!.re).toAgreeWith(-1.5, { absolute: 5e-4 })
  expect(bessel(2).poles[0]!.im).toAgreeWith(0.866, { absolute: 5e-4 })
  expect(elliptic(2, 1, 40).zeros[0]!.im).toAgreeWith(9.9376, { absolute: 5e-5 })
  expect(linkwitzRiley(2).poles[1]!.re).toBe(-1)
  expect(lowPassPrototype({ family: 'butterworth', order: 1 })).toEqual({
    zeros: [],
    poles: [{ re: -1, im: 0 }],
    gain: 1,
  })
  const three = sectionsOf(butterworth(3))
  expect(three.map(({ order }) => order)).toEqual([1, 2])
  expect(three[1]!.order === 2 && three[1]!.q).toAgreeWith(1, { relative: 1e-12 })
  const spec = { type: 'low-pass', passHz: 1e3, stopHz: 2e3, passDb: 3, stopDb: 20 } as const
  expect(minimumOrder(spec).butterworth.order).toBe(4)
})

// Source: scipy.special ellipk, ellipkinc, ellipj (parameter m = k²).
it('has the elliptic integrals and functions of the outside figures', () => {
  const half = modulusOf(0.5)
  expect(quarterPeriod(half)).toAgreeWith(1.685750354812596, { relative: 1e-14 })
  expect(incompleteIntegral(Math.sin(0.7), Math.cos(0.7), modulusOf(0.99))).toAgreeWith(0.7636895351970491, {
    relative: 1e-14,
  })
  const { sn, cn, dn } = jacobi(1, half)
  expect([sn, cn, dn]).toAgreeWith([0.8226355781298623, 0.5685689980951715, 0.9114920056691319], { relative: 1e-14 })
})

it('has the mean of 1 and √2, reciprocal of the lemniscate constant of Gauss', () => {
  // Source: Gauss 1799, 0.83462684167407…, from memory.
  expect(1 / arithmeticGeometricMean(1, Math.SQRT2)).toAgreeWith(0.8346268416740732, { relative: 1e-15 })
})

it('solves the degree equation on both sides of k = 1/√2', () => {
  for (const k1 of [1e-12, 1e-3, 0.3, 0.9])
    for (const order of [1, 2, 7, 20]) {
      const found = modulusByDegree(modulusOf(k1), order)
      const ratio = ({ k, complement }: { k: number; complement: number }) =>
        quarterPeriod({ k: complement, complement: k }) / quarterPeriod({ k, complement })
      expect(order * ratio(found)).toAgreeWith(ratio(modulusOf(k1)), { relative: 1e-13 })
      expect(Math.hypot(found.k, found.complement)).toAgreeWith(1, { relative: 1e-15 })
    }
})
