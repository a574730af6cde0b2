/**
 * Seeded random numbers, uniform on [0, 1) in steps of 2⁻³²; the same seed gives the same numbers everywhere.
 *
 * @param seed any whole number; it is spread over the state by SplitMix32
 * @returns a generator with a period of 2¹²⁸ − 1
 * Source: xoshiro128**, D. Blackman and S. Vigna, ACM Trans. Math. Softw. 47 (2021) 36.
 */
export function seededRandom(seed: number): () => number {
  const next = xoshiro128(splitMix(seed))
  return () => next() / 4294967296
}

/**
 * The generator itself: unsigned 32-bit numbers from a state of four.
 * @param state four 32-bit numbers, not all zero; the array is advanced in place
 */
export function xoshiro128(state: Uint32Array): () => number {
  return () => {
    const [s0, s1, s2, s3] = state as unknown as [number, number, number, number]
    const result = Math.imul(rotateLeft(Math.imul(s1, 5), 7), 9) >>> 0
    const c = s2 ^ s0
    const d = s3 ^ s1
    state[0] = s0 ^ d
    state[1] = s1 ^ c
    state[2] = c ^ (s1 << 9)
    state[3] = rotateLeft(d, 11)
    return result
  }
}

const rotateLeft = (x: number, bits: number) => (x << bits) | (x >>> (32 - bits))

/** Four well-mixed words from one seed, so that neighbouring seeds give unrelated streams. */
function splitMix(seed: number): Uint32Array {
  let x = seed >>> 0
  return Uint32Array.from({ length: 4 }, () => {
    x = (x + 0x9e3779b9) >>> 0
    let z = x
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad)
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97)
    return z ^ (z >>> 15)
  })
}
