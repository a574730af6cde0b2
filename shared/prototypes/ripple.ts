/**
 * ε of a loss in decibels, √(10^(A/10) − 1): |H|² = 1/(1 + ε²) is A dB below 1.
 * @param lossDb A, dB, > 0
 */
export const rippleFactor = (lossDb: number): number => Math.sqrt(Math.expm1((lossDb * Math.LN10) / 10))
