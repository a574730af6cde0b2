import { readFileSync } from 'node:fs'
import { readBlock } from '#shared/page-source/read-block'
import {
  defaultValues,
  evaluateStage,
  nothingAsked,
  plotFrequencies,
  stagePhase,
  stageResponse,
} from '#shared/stage/index'

/** What a key in a part field makes the engine do, in frames of 60 a second, beside one evaluation of H(s) by formula. */
const reading = readBlock(readFileSync('content-seed/lp2-mfb.md', 'utf8'))
if (!reading.ok) throw new Error(reading.problems[0].detail)
const { stage } = reading.value
const ROUNDS = 60

const timed = (work: () => unknown) => {
  const started = performance.now()
  work()
  return performance.now() - started
}
const median = (all: number[]) => all.sort((a, b) => a - b)[all.length >> 1]!

const ours: number[] = []
const baseline: number[] = []
for (let round = 0; round < ROUNDS; round++) {
  const values = { ...defaultValues(stage), R1: 5000 + round }
  const frequenciesHz = plotFrequencies(stage, values)
  ours.push(
    timed(() => {
      evaluateStage(stage, { ...nothingAsked(stage), held: values })
      stageResponse(stage, values, {}, stage.plot.output, frequenciesHz)
      stagePhase(stage, values, {}, stage.plot.output, frequenciesHz)
    }),
  )
  const env = new Float64Array(stage.slots.size)
  for (const [name, value] of Object.entries(values)) env[stage.slots.get(name)!] = value
  const out = new Float64Array(2)
  baseline.push(
    timed(() => {
      for (const f of frequenciesHz) stage.responses[0]!.evaluate(env, 0, 2 * Math.PI * f, out)
    }),
  )
}
console.log(
  JSON.stringify({
    name: 'results, response and phase of a plot by nodal analysis, against H(s) by formula',
    median: median(ours) / median(baseline),
    milliseconds: median(ours),
  }),
)
