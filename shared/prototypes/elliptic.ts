import type { Complex } from '../numerics/complex'
import {
  complementary,
  incompleteIntegral,
  jacobi,
  modulusByDegree,
  quarterPeriod,
  type Modulus,
} from './elliptic-functions'
import { rippleFactor } from './ripple'
import { withConjugates, withDcGain, type ZeroPoleGain } from './zero-pole-gain'

/**
 * Elliptic (Cauer) low-pass, equal ripple in pass band and stop band, ripple edge at 1 rad/s:
 *
 *     |H(jω)|² = 1/(1 + ε² R²(ω)), R = cd(n u K₁, k₁) where ω = cd(u K, k), k₁ = ε/ε_s, n K′/K = K₁′/K₁
 *
 * The pass-band maximum is 1, so that even orders have −ripple at 0 rad/s and −stopDb at infinity.
 *
 * @param order n, 1 to 20
 * @param rippleDb pass-band ripple, dB, > 0
 * @param stopDb least loss in the stop band, dB, > rippleDb; reached at 1/k rad/s
 * @returns poles j cd((u_i − j v₀) K, k), zeros ±j/(k cd(u_i K, k)), u_i = (2i − 1)/n, sc(v₀ n K₁, k₁′) = 1/ε
 * @example elliptic(2, 1, 40).zeros[0].im // 9.9376
 * Source: W. Cauer, Synthesis of Linear Communication Networks (1958); S. J. Orfanidis, notes on elliptic filter
 * design (2006), from memory.
 */
export function elliptic(order: number, rippleDb: number, stopDb: number): ZeroPoleGain {
  const epsilon = rippleFactor(rippleDb)
  const { modulus, discrimination } = moduliOf(order, rippleDb, stopDb)
  const quarter = quarterPeriod(modulus)
  const hypotenuse = Math.hypot(1, epsilon)
  const depth = incompleteIntegral(1 / hypotenuse, epsilon / hypotenuse, complementary(discrimination))
  const y = jacobi((depth * quarter) / (order * quarterPeriod(discrimination)), complementary(modulus))
  const zeros: Complex[] = []
  const poles: Complex[] = order % 2 ? [{ re: -y.sn / y.cn, im: 0 }] : []
  for (let i = 1; 2 * i - 1 < order; i++) {
    const x = jacobi(((2 * i - 1) * quarter) / order, modulus)
    // sn, cn dn of K − u by those of u.
    const sn = x.cn / x.dn
    const cnDn = (modulus.complement ** 2 * x.sn) / x.dn ** 2
    const below = y.cn ** 2 + (modulus.k * sn * y.sn) ** 2
    poles.push({ re: (-cnDn * y.sn * y.cn) / below, im: (sn * y.dn) / below })
    zeros.push({ re: 0, im: 1 / (modulus.k * sn) })
  }
  return withDcGain(withConjugates(zeros), withConjugates(poles), order % 2 ? 1 : 10 ** (-rippleDb / 20))
}

/**
 * Where that filter reaches its stop-band loss, 1/k.
 * @returns rad/s, the ripple edge being 1
 * Source: as for the poles.
 */
export const ellipticStopEdge = (order: number, rippleDb: number, stopDb: number): number =>
  1 / moduliOf(order, rippleDb, stopDb).modulus.k

/**
 * Where that filter falls through half power: ω with R(ω) = 1/ε, the last such frequency where the ripple is deeper
 * than half power.
 *
 * @param stopDb dB, above 3.0103, or there is no such frequency before the stop band
 * @returns rad/s, the ripple edge being 1
 * Source: as for the poles.
 */
export function ellipticHalfPower(order: number, rippleDb: number, stopDb: number): number {
  const epsilon = rippleFactor(rippleDb)
  const { modulus, discrimination } = moduliOf(order, rippleDb, stopDb)
  const quarters = quarterPeriod(modulus) / (order * quarterPeriod(discrimination))
  if (epsilon < 1) {
    // Between the edges ω = cd(jy, k) = 1/dn(y, k′).
    const sine = Math.sqrt((1 - epsilon) * (1 + epsilon)) / discrimination.complement
    const cosine = Math.sqrt(epsilon ** 2 - discrimination.k ** 2) / discrimination.complement
    const inverse = incompleteIntegral(sine, cosine, complementary(discrimination))
    return 1 / jacobi(inverse * quarters, complementary(modulus)).dn
  }
  // Within the pass band cd(x) = 1/ε, where sn² = (1 − cd²)/(1 − k₁² cd²).
  const ratio = Math.sqrt((1 - epsilon ** -2) / (1 - (discrimination.k / epsilon) ** 2))
  const cosine = discrimination.complement / epsilon / Math.sqrt(1 - (discrimination.k / epsilon) ** 2)
  const x = jacobi(incompleteIntegral(ratio, cosine, discrimination) * quarters, modulus)
  return x.cn / x.dn
}

function moduliOf(order: number, rippleDb: number, stopDb: number): { modulus: Modulus; discrimination: Modulus } {
  const epsilon = rippleFactor(rippleDb)
  const epsilonStop = rippleFactor(stopDb)
  const complement = Math.sqrt((1 - epsilon / epsilonStop) * (1 + epsilon / epsilonStop))
  const discrimination = { k: epsilon / epsilonStop, complement }
  return { modulus: modulusByDegree(discrimination, order), discrimination }
}
