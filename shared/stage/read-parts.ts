import type { Circuit, PassiveKind } from '../circuit/part'
import { PART_UNITS } from '../circuit/part'
import type { CalculatorSource, PartEntry } from '../contracts/calculator'
import { formatQuantity } from '../quantities/format'
import { readPercent } from '../quantities/read'
import { BUILDABLE } from './buildable'
import type { ReadingContext } from './reading-context'
import type { StagePart } from './stage'

/** What an entry takes when it does not say: the house stock's usual series, range and tolerance. Common practice. */
const HOUSE_DEFAULTS = {
  resistor: { series: 'E96', from: 100, to: 1e6, tolerance: 0.01 },
  capacitor: { series: 'E12', from: 100e-12, to: 1e-6, tolerance: 0.05 },
  inductor: { series: 'E12', from: 1e-6, to: 0.1, tolerance: 0.1 },
} as const

const KIND_BY_LETTER: Record<string, PassiveKind> = { R: 'resistor', C: 'capacitor', L: 'inductor' }

/** Kind of an entry: as stated, else by the first letter of its name; null for an op-amp. */
export const kindOfEntry = (name: string, entry: PartEntry): PassiveKind | null => {
  const kind = entry.kind ?? KIND_BY_LETTER[name[0]!] ?? 'opamp'
  return kind === 'opamp' ? null : kind
}

/** Reads `parts`: every passive part of the circuit has exactly one entry, matched ones share theirs. */
export function readParts(context: ReadingContext, source: CalculatorSource, circuit: Circuit): StagePart[] {
  const passive = new Map(
    circuit.parts.flatMap((part) => (part.kind === 'opamp' ? [] : [[part.ref, part.kind] as const])),
  )
  for (const reference of circuit.references) if (reference.through) passive.set(reference.through, 'resistor')
  const opamps = new Set(circuit.parts.flatMap((part) => (part.kind === 'opamp' ? [part.ref] : [])))
  const taken = new Map<string, string>()
  const parts: StagePart[] = []
  for (const [name, entry] of Object.entries(source.parts)) {
    const path = ['parts', name]
    const kind = kindOfEntry(name, entry)
    if (kind === null) {
      if (!opamps.has(name)) context.complain(path, `${name} is not an op-amp of this circuit.`)
      continue
    }
    const refs = entry.of ?? [name]
    for (const ref of refs) {
      const drawn = passive.get(ref)
      const where = entry.of ? [...path, 'of'] : path
      if (!drawn)
        context.complain(where, `${ref} is not a part of this circuit. It has ${[...passive.keys()].join(', ')}.`)
      else if (drawn !== kind) context.complain(where, `${ref} is drawn as a ${drawn}; ${name} is a ${kind}.`)
      if (taken.has(ref)) context.complain(where, `${ref} already belongs to ${taken.get(ref)}.`)
      taken.set(ref, name)
    }
    const part = readPart(context, name, entry, kind, refs)
    if (part) parts.push(part)
  }
  for (const ref of passive.keys())
    if (!taken.has(ref)) context.complain(['parts'], `${ref} is drawn in the circuit and has no entry under parts.`)
  return parts
}

function readPart(
  context: ReadingContext,
  name: string,
  entry: PartEntry,
  kind: PassiveKind,
  refs: string[],
): StagePart | null {
  const unit = PART_UNITS[kind]
  const path = ['parts', name]
  const house = HOUSE_DEFAULTS[kind]
  if (entry.default === undefined) {
    context.complain(
      path,
      `${name} needs a default value, such as default: ${kind === 'resistor' ? '10k' : kind === 'capacitor' ? '10n' : '10m'}.`,
    )
    return null
  }
  const read = (key: 'default' | 'from' | 'to') =>
    entry[key] === undefined ? undefined : readBuildable(context, [...path, key], entry[key], unit, name)
  const value = read('default')
  const from = entry.from === undefined ? house.from : read('from')
  const to = entry.to === undefined ? house.to : read('to')
  const tolerance =
    entry.tolerance === undefined ? house.tolerance : context.take([...path, 'tolerance'], readPercent(entry.tolerance))
  if (value === undefined || from === undefined || to === undefined || tolerance === undefined) return null
  if (!(from < to)) {
    context.complain([...path, 'from'], `The range of ${name} runs from the smaller to the larger value.`)
    return null
  }
  return {
    name,
    kind,
    unit,
    refs,
    default: value,
    series: entry.series ?? house.series,
    from,
    to,
    tolerance,
    driftPerKelvin: readDrift(context, path, entry),
    class: entry.class ?? null,
    meaning: entry.meaning ?? null,
  }
}

function readBuildable(
  context: ReadingContext,
  path: string[],
  text: string,
  unit: StagePart['unit'],
  name: string,
): number | undefined {
  const value = context.quantity(path, text, unit, name)
  const [least, most] = BUILDABLE[unit]
  if (value === undefined || (value >= least && value <= most)) return value
  context.complain(path, `${formatQuantity(value, unit)} cannot be built.`, 'value-out-of-range')
  return undefined
}

/** Drift is written in ppm/K: `25 ppm/K`. */
function readDrift(context: ReadingContext, path: string[], entry: PartEntry): number | null {
  if (entry.drift === undefined) return null
  const match = /^[±]?\s*(\d+(?:\.\d+)?)\s*ppm\s*\/\s*(?:K|°C)$/.exec(entry.drift.trim())
  if (match) return Number(match[1]) * 1e-6
  context.complain([...path, 'drift'], `“${entry.drift}” is not a drift. Write it in ppm/K, such as 25 ppm/K.`)
  return null
}
