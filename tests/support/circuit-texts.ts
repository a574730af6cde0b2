/** Six circuits as an editor writes them, each with the check file of tests/checks/circuits that holds its cards. */
export const CIRCUIT_TEXTS = {
  'lp1-inv': {
    check: 'lp1-inverting',
    text: `format 1
grid 20 x 9
input in 1,5
R Ri 3,5 6,5
R Rf 10,3 13,3
C Cf 10,1 13,1
opamp U1 - 11,5 + 11,7 out 15,6
wire 1,5 3,5
wire 6,5 11,5
wire 8,5 8,1 10,1
wire 8,3 10,3
wire 13,1 16,1 16,6
wire 13,3 16,3
wire 15,6 19,6
wire 11,7 10,7
ground 10,7
output out 19,6
`,
  },
  'hp1-inv': {
    check: 'hp1-inverting',
    text: `format 1
grid 21 x 8
input in 1,4
R Ri 2,4 5,4
C Ci 6,4 9,4
R Rf 12,2 15,2
opamp U1 - 12,4 + 12,6 out 16,5
wire 1,4 2,4
wire 5,4 6,4
wire 9,4 12,4
wire 10,4 10,2 12,2
wire 15,2 17,2 17,5
wire 16,5 20,5
wire 12,6 11,6
ground 11,6
output out 20,5
`,
  },
  'bp1-wide': {
    check: 'bp-wide-inverting',
    text: `format 1
grid 21 x 9
input in 1,5
R Ri 2,5 5,5
C Ci 6,5 9,5
R Rf 12,3 15,3
C Cf 12,1 15,1
opamp U1 - 12,5 + 12,7 out 16,6
wire 1,5 2,5
wire 5,5 6,5
wire 9,5 12,5
wire 10,5 10,1 12,1
wire 10,3 12,3
wire 15,1 17,1 17,6
wire 15,3 17,3
wire 16,6 20,6
wire 12,7 11,7
ground 11,7
output out 20,6
`,
  },
  'lp1-ni': {
    check: 'lp1-noninverting-gain',
    text: `format 1
grid 20 x 11
input in 1,2
R R1 3,2 6,2
C C1 8,3 8,5
opamp U1 - 12,4 + 12,2 out 16,3
R Rf 13,6 16,6
R Rg 11,6 11,9
wire 1,2 3,2
wire 6,2 12,2
wire 8,2 8,3
wire 12,4 11,4 11,6
wire 11,6 13,6
wire 16,6 17,6 17,3
wire 16,3 19,3
ground 8,5
ground 11,9
output out 19,3
`,
  },
  'lp2-sku': {
    check: 'lp2-sallen-key-unity',
    text: `format 1
grid 21 x 9
input in 1,4
R R1 2,4 5,4
R R2 7,4 10,4
C C1 10,1 13,1
C C2 11,5 11,7
opamp U1 - 13,6 + 13,4 out 17,5
wire 1,4 2,4
wire 5,4 7,4
wire 6,4 6,1 10,1
wire 13,1 18,1 18,5
wire 10,4 13,4
wire 11,4 11,5
wire 13,6 12,6 12,8 18,8 18,5
wire 17,5 20,5
ground 11,7
output out 20,5
`,
  },
  'lp2-mfb': {
    check: 'lp2-mfb',
    text: `format 1
grid 22 x 9
input in 1,5
R R1 2,5 5,5
R R2 11,1 14,1
R R3 8,5 11,5
C C1 6,6 6,8
C C2 14,3 17,3
opamp U1 - 14,5 + 14,7 out 18,6
wire 1,5 2,5
wire 5,5 8,5
wire 6,5 6,6
wire 6,5 6,1 11,1
wire 14,1 19,1 19,6
wire 11,5 14,5
wire 12,5 12,3 14,3
wire 17,3 19,3
wire 18,6 21,6
wire 14,7 13,7
ground 6,8
ground 13,7
output out 21,6
`,
  },
} as const

export type CircuitTextName = keyof typeof CIRCUIT_TEXTS
export const CIRCUIT_TEXT_NAMES = Object.keys(CIRCUIT_TEXTS) as CircuitTextName[]
