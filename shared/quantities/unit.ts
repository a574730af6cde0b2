/** Units that values carry, by the symbol shown. '' is a plain number. */
export const UNITS = [
  'Ω',
  'F',
  'H',
  'Hz',
  's',
  'V',
  'A',
  'K',
  '',
  '%',
  'V/√Hz',
  'A/√Hz',
  'rad/s',
  'dB',
  '°',
  'V/s',
  'W',
] as const
export type Unit = (typeof UNITS)[number]

/** What a unit measures, in words, with an example of a value as it is typed. */
export const UNIT_WORDS: Record<Unit, { quantity: string; example: string }> = {
  Ω: { quantity: 'a resistance', example: '4k7' },
  F: { quantity: 'a capacitance', example: '4n7' },
  H: { quantity: 'an inductance', example: '10 mH' },
  Hz: { quantity: 'a frequency', example: '2.4 kHz' },
  s: { quantity: 'a time', example: '10 µs' },
  V: { quantity: 'a voltage', example: '3.3 V' },
  A: { quantity: 'a current', example: '2 mA' },
  K: { quantity: 'a temperature', example: '25 °C' },
  '': { quantity: 'a plain number', example: '0.707' },
  '%': { quantity: 'a percentage', example: '1 %' },
  'V/√Hz': { quantity: 'a noise density', example: '8 nV/√Hz' },
  'A/√Hz': { quantity: 'a current noise density', example: '2 pA/√Hz' },
  'rad/s': { quantity: 'an angular frequency', example: '15 krad/s' },
  dB: { quantity: 'a level', example: '6 dB' },
  '°': { quantity: 'an angle', example: '45 °' },
  'V/s': { quantity: 'a slew rate', example: '5 V/µs' },
  W: { quantity: 'a power', example: '0.1 W' },
}

/** Spellings that are read for each unit. */
export const UNIT_SPELLINGS: Record<Unit, string[]> = {
  Ω: ['\u03a9', '\u2126', 'ohm', 'Ohm', 'OHM', 'ohms', 'Ohms'],
  F: ['F'],
  H: ['H'],
  Hz: ['Hz', 'hz', 'HZ'],
  s: ['s'],
  V: ['V'],
  A: ['A'],
  K: ['K'],
  '': [],
  '%': ['%'],
  'V/√Hz': ['V/√Hz', 'V/rtHz', 'V/sqrt(Hz)'],
  'A/√Hz': ['A/√Hz', 'A/rtHz', 'A/sqrt(Hz)'],
  'rad/s': ['rad/s'],
  dB: ['dB'],
  '°': ['°', 'deg'],
  'V/s': ['V/s'],
  W: ['W'],
}

/** Whole spellings that carry a power of ten of their own: slew rates are written per microsecond. */
export const UNIT_MULTIPLES: Partial<Record<Unit, Record<string, number>>> = {
  'V/s': { 'V/µs': 6, 'V/μs': 6, 'V/us': 6, 'V/ms': 3 },
}

/** SI prefixes by letter: power of ten. `K` is kilo on drawings, `u` is micro on keyboards. */
export const PREFIX_EXPONENTS: Record<string, number> = {
  T: 12,
  G: 9,
  M: 6,
  k: 3,
  K: 3,
  m: -3,
  µ: -6,
  μ: -6,
  u: -6,
  n: -9,
  p: -12,
  f: -15,
}

/** Letters that stand for the decimal mark in the codes of IEC 60062, by unit; frequencies borrow the prefixes. */
export const CODE_LETTERS: Partial<Record<Unit, Record<string, number>>> = {
  Ω: { R: 0, K: 3, k: 3, M: 6, G: 9, T: 12 },
  F: { p: -12, n: -9, µ: -6, μ: -6, u: -6, m: -3, F: 0 },
  H: { n: -9, µ: -6, μ: -6, u: -6, m: -3, H: 0 },
  Hz: { k: 3, K: 3, M: 6, G: 9 },
  V: { V: 0 },
}
