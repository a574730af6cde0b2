export interface Complex {
  re: number
  im: number
}

/** Complex vector of n numbers as two real ones. */
export interface ComplexArray {
  re: Float64Array
  im: Float64Array
}

export const complexArray = (length: number): ComplexArray => ({
  re: new Float64Array(length),
  im: new Float64Array(length),
})
