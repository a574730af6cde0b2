/**
 * Modulus of elliptic functions together with its complement, k² + k′² = 1: each of them is known to its last digits
 * even where the other is 1 in doubles.
 */
export interface Modulus {
  k: number
  complement: number
}

/** The modulus with its complement, √((1 − k)(1 + k)). @param k 0 < k < 1 */
export const modulusOf = (k: number): Modulus => ({ k, complement: Math.sqrt((1 - k) * (1 + k)) })

/** K and K′ change places. */
export const complementary = ({ k, complement }: Modulus): Modulus => ({ k: complement, complement: k })

/** Arithmetic–geometric mean of two numbers above zero. Source: Abramowitz & Stegun (1964), 17.6. */
export function arithmeticGeometricMean(a: number, b: number): number {
  while (Math.abs(a - b) > 4 * Number.EPSILON * a) [a, b] = [(a + b) / 2, Math.sqrt(a * b)]
  return (a + b) / 2
}

/** Complete elliptic integral of the first kind, K(k) = π/(2 agm(1, k′)). Source: Abramowitz & Stegun (1964), 17.6.3. */
export const quarterPeriod = ({ complement }: Modulus): number => Math.PI / (2 * arithmeticGeometricMean(1, complement))

/**
 * Incomplete elliptic integral of the first kind, F(φ, k), of an angle given by sine and cosine.
 *
 * @param sine sin φ, 0 to 1
 * @param cosine cos φ, 0 to 1
 * @returns F = sin φ · R_F(cos²φ, 1 − k² sin²φ, 1)
 * Source: B. C. Carlson, Numer. Math. 33 (1979) 1, by duplication.
 */
export function incompleteIntegral(sine: number, cosine: number, { complement }: Modulus): number {
  let x = cosine * cosine
  // 1 − k² sin²φ without the difference.
  let y = x + (complement * sine) ** 2
  let z = 1
  for (;;) {
    const mean = (x + y + z) / 3
    const spread = Math.max(Math.abs(x - mean), Math.abs(y - mean), Math.abs(z - mean)) / mean
    if (spread < 1e-3) {
      const dx = 1 - x / mean
      const dy = 1 - y / mean
      const dz = -dx - dy
      const e2 = dx * dy - dz * dz
      const e3 = dx * dy * dz
      return (sine * (1 - e2 / 10 + e3 / 14 + (e2 * e2) / 24 - (3 * e2 * e3) / 44)) / Math.sqrt(mean)
    }
    const step = Math.sqrt(x * y) + Math.sqrt(y * z) + Math.sqrt(z * x)
    x = (x + step) / 4
    y = (y + step) / 4
    z = (z + step) / 4
  }
}

/** Jacobi's sn, cn and dn of a real argument. */
export interface JacobiValues {
  sn: number
  cn: number
  dn: number
}

/**
 * Jacobi's elliptic functions of a real argument, by the descending Landen transformation.
 *
 * @param u argument, between 0 and K
 * @example jacobi(1, modulusOf(0.5)).sn // 0.8226
 * Source: Abramowitz & Stegun (1964), 16.4.
 */
export function jacobi(u: number, { k, complement }: Modulus): JacobiValues {
  const ratios: number[] = []
  let a = 1
  let b = complement
  let c = k
  while (c > Number.EPSILON * a) {
    ;[a, b, c] = [(a + b) / 2, Math.sqrt(a * b), (a - b) / 2]
    ratios.push(c / a)
  }
  let angle = 2 ** ratios.length * a * u
  for (const ratio of ratios.reverse()) angle = (angle + Math.asin(ratio * Math.sin(angle))) / 2
  const sn = Math.sin(angle)
  const cn = Math.cos(angle)
  return { sn, cn, dn: Math.hypot(cn, complement * sn) }
}

/**
 * The modulus whose nome is the n-th root of that of another: K′/K = (K₁′/K₁)/n, the degree equation of the elliptic
 * filter solved for its selectivity.
 *
 *     k = θ₂²(q)/θ₃²(q), k′ = θ₄²(q)/θ₃²(q), q = exp(−π K′/K); above q = e^−π by the complementary nome
 *
 * @param discrimination k₁
 * @param order n, ≥ 1
 * Source: S. J. Orfanidis, notes on elliptic filter design (2006); Abramowitz & Stegun (1964), 16.27, from memory.
 */
export function modulusByDegree(discrimination: Modulus, order: number): Modulus {
  const ratio = quarterPeriod(complementary(discrimination)) / quarterPeriod(discrimination) / order
  return ratio >= 1
    ? modulusOfNome(Math.exp(-Math.PI * ratio))
    : complementary(modulusOfNome(Math.exp(-Math.PI / ratio)))
}

/** For nomes up to e^−π, where four terms of the theta series are enough. */
function modulusOfNome(nome: number): Modulus {
  let [two, three, four] = [1, 1, 1]
  for (let m = 1; m <= 4; m++) {
    const term = 2 * nome ** (m * m)
    two += nome ** (m * (m + 1))
    three += term
    four += m % 2 ? -term : term
  }
  return { k: 4 * Math.sqrt(nome) * (two / three) ** 2, complement: (four / three) ** 2 }
}
