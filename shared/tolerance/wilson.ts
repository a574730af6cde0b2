/** Two-sided 95 % of the normal distribution. */
const Z_95 = 1.959963984540054

/** A share of builds with the bounds that hold it with 95 % confidence. */
export interface Share {
  kept: number
  builds: number
  fraction: number
  lower: number
  upper: number
}

/**
 * A share with its 95 % confidence bounds by the score interval, which stays sound at 0 and at all.
 * Source: E. B. Wilson, J. Am. Stat. Assoc. 22 (1927) 209.
 * @example wilsonShare(81, 263) // { fraction: 0.308, lower: 0.2553, upper: 0.3662, … }
 */
export function wilsonShare(kept: number, builds: number): Share {
  const fraction = kept / builds
  const z2 = Z_95 ** 2
  const centre = (kept + z2 / 2) / (builds + z2)
  const half = (Z_95 / (builds + z2)) * Math.sqrt((kept * (builds - kept)) / builds + z2 / 4)
  return {
    kept,
    builds,
    fraction,
    lower: kept === 0 ? 0 : centre - half,
    upper: kept === builds ? 1 : centre + half,
  }
}
