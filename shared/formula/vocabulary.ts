/** Functions of the formula language, with how many arguments each takes. */
export const FUNCTIONS = {
  sqrt: [1, 1],
  abs: [1, 1],
  exp: [1, 1],
  ln: [1, 1],
  log10: [1, 1],
  sin: [1, 1],
  cos: [1, 1],
  tan: [1, 1],
  atan: [1, 1],
  atan2: [2, 2],
  min: [1, 16],
  max: [1, 16],
  par: [2, 16],
  ser: [2, 16],
  dB: [1, 1],
} as const satisfies Record<string, [number, number]>
export type FunctionName = keyof typeof FUNCTIONS

/** What each function gives, for the help page. */
export const FUNCTION_WORDS: Record<FunctionName, string> = {
  sqrt: 'square root',
  abs: 'magnitude',
  exp: 'e to the power',
  ln: 'natural logarithm',
  log10: 'common logarithm',
  sin: 'sine of radians',
  cos: 'cosine of radians',
  tan: 'tangent of radians',
  atan: 'arc tangent in radians',
  atan2: 'angle of (y, x) in radians',
  min: 'the smallest of its arguments',
  max: 'the largest of its arguments',
  par: 'in parallel: 1/(1/a + 1/b + …)',
  ser: 'in series: a + b + …',
  dB: '20·log10 of the magnitude',
}

/** Functions that also take complex arguments, in a `response`. */
export const COMPLEX_FUNCTIONS: readonly FunctionName[] = ['sqrt', 'exp', 'par', 'ser']

/** Constants by name. Boltzmann's constant is exact in the SI of 2019. */
export const CONSTANTS = { pi: Math.PI, k_B: 1.380649e-23 } as const

/** Data of a chosen op-amp, as `GBW(U1)`, with units. */
export const OPAMP_DATA = {
  A0: '',
  GBW: 'Hz',
  SR: 'V/s',
  V_os: 'V',
  I_b: 'A',
  e_n: 'V/√Hz',
  i_n: 'A/√Hz',
  R_o: 'Ω',
  C_in: 'F',
} as const
export type OpampDatum = keyof typeof OPAMP_DATA

/** Words that the parser would take for operators or values of its own. */
export const RESERVED = [
  'and',
  'or',
  'not',
  'xor',
  'mod',
  'to',
  'in',
  'end',
  'true',
  'false',
  'null',
  'undefined',
  'NaN',
  'Infinity',
]
