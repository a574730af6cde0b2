import type { Sizing } from '#shared/contracts/sizings'
import {
  nothingAsked,
  plotFrequencies,
  readStage,
  evaluateStage,
  selfCheck,
  stagePhase,
  stageResponse,
  testTable,
} from '#shared/stage/index'
import { valueOf } from '#shared/problems'

const CIRCUIT = `input in 1,6
R Ri 1,6 6,6
wire 6,6 11,6
wire 8,6 8,1 9,1
wire 8,3 9,3
C Cf 9,1 13,1 label above
R Rf 9,3 13,3
wire 13,1 16,1 16,7
wire 13,3 16,3
opamp U1 - 11,6 + 11,8 out 15,7
wire 11,8 10,8 10,9
ground 10,9
wire 15,7 18,7
output out 18,7
`

const CALCULATOR = `parts:
  Ri: { default: 22.1k, series: E96, tolerance: 1 % }
  Rf: { default: 44.2k, series: E96, tolerance: 1 % }
  Cf: { default: 1.5n, series: E12, tolerance: 5 % }
results:
  f_c: { formula: 1/(2*pi*Rf*Cf), unit: Hz, meaning: cut-off frequency, is: half-power frequency }
  K: { formula: -Rf/Ri, meaning: gain in the pass-band, is: gain at 0 Hz }
response: -(Rf/Ri)/(1 + s*Rf*Cf)
sizing:
  targets: { f_c: 2.4 kHz, K: -2 }
  free:
    Cf: { start: 1/(2*pi*f_c*47k) }
  steps:
    - { part: Rf, formula: 1/(2*pi*f_c*Cf) }
    - { part: Ri, formula: -Rf/K }
`

/** A first-order low-pass as a reader saved it: Ri held, the rest solved for 2.4 kHz and −2. */
export function lowPassSizing(changes: Partial<Sizing> = {}): Sizing {
  const stage = valueOf(readStage({ circuit: CIRCUIT, calculator: CALCULATOR }))
  const asked = { ...nothingAsked(stage), held: { Ri: 22100 }, targets: { f_c: 2400, K: -2 } }
  const { values, ...outcome } = evaluateStage(stage, asked)
  const frequenciesHz = plotFrequencies(stage, values)
  return structuredClone({
    number: 'S-12',
    titleBlock: {
      code: 'lp1-inv',
      title: 'Inverting low-pass, first order',
      function: 'low-pass',
      topology: 'inverting',
      order: 1,
      revision: 3,
      revisions: 3,
      status: 'approved',
      owner: 'Ines Marlow',
      author: 'Ines Marlow',
      approvedBy: 'Rade Oyelaran',
      date: '2026-11-18T09:00:00.000Z',
    },
    statusNow: 'approved',
    withdrawnReason: null,
    newerRevision: null,
    asked: {
      block: 'lp1-inv',
      revision: 3,
      values: { Ri: '22.1k' },
      targets: { f_c: '2.4 kHz', K: -2 },
      conditions: { sourceOhm: 50 },
      series: {},
      goodEnough: 0.005,
    },
    outcome: { values, ...outcome },
    conditions: { sourceOhm: 50 },
    opAmps: {},
    limitsNotKept: [],
    note: '',
    reason: '',
    response: stageResponse(stage, values, {}, 'out', frequenciesHz),
    phaseRad: stagePhase(stage, values, {}, 'out', frequenciesHz),
    testTable: testTable(stage, values, {}),
    selfCheck: selfCheck(stage, values),
    engineVersion: '1.0.0',
    savedBy: 'Ines Marlow',
    savedAt: '2026-12-01T13:26:28.857Z',
    link: 'https://shelf.example/sizings/S-12',
    circuit: CIRCUIT,
    calculator: CALCULATOR,
    ...changes,
  } satisfies Sizing)
}
