import { all, create } from 'mathjs'
import { compileFormula } from '#shared/formula/compile'
import { parseFormula } from '#shared/formula/parse'

/** Our compiled formulas beside the parser package's own compiled evaluation, in one run. */
const TEXT = '1/(2*pi*sqrt(R1*R2*C1*C2))'
const NAMES = ['R1', 'R2', 'C1', 'C2']
const VALUES = [7680, 15e3, 22e-9, 10e-9]
const COUNT = 300_000
const ROUNDS = 5

const reading = parseFormula(TEXT, { kind: 'value' })
if (!reading.ok) throw new Error(reading.problems[0].detail)
const ours = compileFormula(reading.value, NAMES)
const vector = Float64Array.from(VALUES)
const baseline = create(all!, {}).compile(TEXT)
const scope = new Map(NAMES.map((name, k) => [name, VALUES[k]!]))

const timed = (work: () => number) => {
  const started = performance.now()
  let sum = 0
  for (let k = 0; k < COUNT; k++) sum += work()
  if (!Number.isFinite(sum)) throw new Error('A figure was not finite.')
  return performance.now() - started
}

const ratios: number[] = []
for (let round = 0; round < ROUNDS; round++) {
  const theirs = timed(() => baseline.evaluate(scope) as number)
  ratios.push(theirs / timed(() => ours(vector)))
}
ratios.sort((a, b) => a - b)
console.log(
  JSON.stringify({
    name: 'formula, compiled, against the parser package',
    least: ratios[0],
    median: ratios[ROUNDS >> 1],
    most: ratios.at(-1),
  }),
)
