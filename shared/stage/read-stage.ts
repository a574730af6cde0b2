import { readCircuit } from '../circuit/grammar/read-circuit'
import { netlistOf } from '../circuit/netlist/netlist-of'
import { CalculatorSource } from '../contracts/calculator'
import { readYaml } from '../page-source/read-yaml'
import type { Problem, Reading } from '../problems'
import type { Stage } from './stage'
import { CONDITION_NAMES } from '../contracts/conditions'
import { ReadingContext } from './reading-context'
import { kindOfEntry, readParts } from './read-parts'
import { readOutput, readResponses, readResults, resultOrder, unitOf } from './read-results'
import { readLimits, readRecipe } from './read-recipe'

/** The two fences of a page that compute, each with the line of the page that its first line is on. */
export interface StageSource {
  circuit: string
  circuitLine?: number
  calculator: string
  calculatorLine?: number
}

/**
 * Reads a block's circuit and calculator into a stage that can compute.
 * @returns the stage, or every problem of both texts with its line and column in the page
 */
export function readStage(source: StageSource): Reading<Stage> {
  const circuit = shifted(readCircuit(source.circuit), (source.circuitLine ?? 1) - 1)
  const yaml = readYaml(source.calculator, source.calculatorLine ?? 1)
  if (!circuit.ok || !yaml.ok) return failed([...problemsOf(circuit), ...problemsOf(yaml)])
  const netlist = shifted(netlistOf(circuit.value), (source.circuitLine ?? 1) - 1)
  const context = new ReadingContext(yaml.value.positionOf)
  const parsed = CalculatorSource.safeParse(yaml.value.value ?? {})
  if (!parsed.success)
    for (const issue of parsed.error.issues)
      context.complain(
        issue.path as (string | number)[],
        issue.message.endsWith('.') ? issue.message : `${issue.message}.`,
      )
  if (!netlist.ok || !parsed.success) return failed([...problemsOf(netlist), ...context.problems])

  const calculator = parsed.data
  const parts = readParts(context, calculator, circuit.value)
  const outputs = netlist.value.outputs.map((port) => port.name)
  const units: [string, string][] = Object.entries(calculator.parts).flatMap(([name, entry]) => {
    const kind = kindOfEntry(name, entry)
    return kind ? [[name, { resistor: 'Ω', capacitor: 'F', inductor: 'H' }[kind]]] : []
  })
  context.declare(
    units,
    Object.entries(calculator.results).map(([name, entry]) => [name, unitOf(entry)]),
  )
  const results = readResults(context, calculator, outputs)
  const hertz = (key: 'from' | 'to') =>
    calculator.plots?.[key] === undefined
      ? null
      : (context.quantity(['plots', key], calculator.plots[key], 'Hz') ?? null)
  const [fromHz, toHz] = [hertz('from'), hertz('to')]
  if (fromHz !== null && toHz !== null && !(fromHz < toHz))
    context.complain(['plots'], 'The range of the plot runs from the lower to the higher frequency.')
  const stage: Stage = {
    circuit: circuit.value,
    netlist: netlist.value,
    parts,
    results,
    resultOrder: resultOrder(context, results),
    responses: readResponses(context, calculator, outputs),
    recipe: readRecipe(context, calculator, parts, results),
    limits: readLimits(context, calculator),
    outputs,
    plot: {
      fromHz,
      toHz,
      output: readOutput(context, ['plots', 'output'], calculator.plots?.output, outputs),
    },
    slots: new Map(context.names.map((name, slot) => [name, slot])),
    opamps: circuit.value.parts.flatMap((part) => (part.kind === 'opamp' ? [part.ref] : [])),
  }
  const clash = context.names.find((name, k) => context.names.indexOf(name) !== k)
  if (clash)
    context.complain(
      [],
      `The name ${clash} stands for two things. Conditions are called ${CONDITION_NAMES.join(', ')}.`,
    )
  return context.problems.length ? failed(context.problems) : { ok: true, value: stage }
}

const problemsOf = (reading: Reading<unknown>): Problem[] => (reading.ok ? [] : reading.problems)

const failed = (problems: Problem[]): { ok: false; problems: [Problem, ...Problem[]] } => ({
  ok: false,
  problems: problems as [Problem, ...Problem[]],
})

/** Lines of a fence counted in the page. */
const shifted = <T>(reading: Reading<T>, lines: number): Reading<T> =>
  reading.ok || lines === 0
    ? reading
    : failed(reading.problems.map((one) => (one.line === undefined ? one : { ...one, line: one.line + lines })))
