import { nearName } from '../../formula/near-name'
import type { Problem, Reading } from '../../problems'
import type { Circuit, LabelSide, OpampPart, PassiveKind, PassivePart } from '../part'
import { pointsOf } from '../points'
import { checkCircuit } from './check-circuit'
import type { Statement, Word } from './statement'
import { pointOf, statementsOf } from './statement'

const KEYWORDS = [
  'format',
  'grid',
  'input',
  'output',
  'R',
  'C',
  'L',
  'opamp',
  'wire',
  'ground',
  'reference',
  'supply',
  'name',
]
const KINDS: Record<string, PassiveKind> = { R: 'resistor', C: 'capacitor', L: 'inductor' }
const SIDES: LabelSide[] = ['above', 'below', 'left', 'right']
const NODE_NAME = /^[A-Za-z][A-Za-z0-9_]{0,15}[+-]?$/
const TEXT_MAX = 64 * 1024
const STATEMENTS_MAX = 2000

/**
 * Reads a circuit text, format 1: one statement a line, `#` starts a comment.
 *
 *     format 1
 *     grid 20 x 11
 *     input in 1,6            input in + 1,4 - 1,8
 *     output out 18,7         output out + 18,5 - 18,9
 *     R Ri 3,6 6,6 label below
 *     opamp U1 - 11,6 + 11,8 out 15,7 supply 13,5 13,9
 *     wire 1,6 3,6 3,9
 *     ground 10,9
 *     reference Vref 10,9 through Rv
 *     supply VCC 13,4
 *     name a 6,4
 *
 * @returns the circuit, or every problem with its line and column
 */
export function readCircuit(text: string): Reading<Circuit> {
  const reader = new CircuitReader()
  if (text.length > TEXT_MAX)
    reader.complain({ line: 1, column: 1 }, `A circuit text has at most ${TEXT_MAX} characters.`)
  else {
    const statements = statementsOf(text)
    if (statements.length > STATEMENTS_MAX)
      reader.complain({ line: 1, column: 1 }, `A circuit has at most ${STATEMENTS_MAX} lines.`)
    else for (const statement of statements) reader.read(statement)
  }
  reader.settleGrid()
  reader.problems.push(...checkCircuit(reader.circuit, reader.problems.length === 0))
  const inOrder = reader.problems.sort((a, b) => a.line! - b.line! || a.column! - b.column!)
  return inOrder.length
    ? { ok: false, problems: inOrder as [Problem, ...Problem[]] }
    : { ok: true, value: reader.circuit }
}

class CircuitReader {
  readonly problems: Problem[] = []
  readonly circuit: Circuit = {
    format: 1,
    grid: { width: 0, height: 0 },
    parts: [],
    ports: [],
    wires: [],
    grounds: [],
    references: [],
    supplies: [],
    names: [],
  }

  complain(at: { line: number; column: number }, detail: string) {
    this.problems.push({ code: 'circuit-not-read', detail, line: at.line, column: at.column })
  }

  private fail({ span }: Statement, word: Word | undefined, detail: string) {
    this.complain({ line: span.line, column: word?.column ?? span.endColumn }, detail)
  }

  read(statement: Statement) {
    const keyword = statement.words[0]!
    switch (keyword.text) {
      case 'format':
        if (statement.words[1]?.text !== '1')
          this.fail(statement, statement.words[1], 'Format 1 is read here: write “format 1”.')
        return
      case 'grid':
        return this.grid(statement)
      case 'input':
      case 'output':
        return this.port(statement, keyword.text)
      case 'R':
      case 'C':
      case 'L':
        return this.passive(statement, KINDS[keyword.text]!)
      case 'opamp':
        return this.opamp(statement)
      case 'wire':
        return this.wire(statement)
      case 'ground':
        return this.ground(statement)
      case 'reference':
      case 'supply':
      case 'name':
        return this.named(statement, keyword.text)
      default: {
        const near = nearName(keyword.text, KEYWORDS)
        this.fail(
          statement,
          keyword,
          `“${keyword.text.slice(0, 30)}” begins no statement.${near ? ` Did you mean ${near}?` : ` ${KEYWORDS.join(', ')} do.`}`,
        )
      }
    }
  }

  private grid(statement: Statement) {
    const [, width, x, height] = statement.words
    const [w, h] = [Number(width?.text), Number(height?.text)]
    if (x?.text !== 'x' || !(w >= 4 && w <= 200) || !(h >= 4 && h <= 200) || !Number.isInteger(w + h))
      return this.fail(statement, width, 'A grid is written as “grid 20 x 11”, 4 to 200 steps each way.')
    this.circuit.grid = { width: w, height: h }
  }

  private point(statement: Statement, k: number, what: string) {
    const point = pointOf(statement.words[k])
    if (!point) this.fail(statement, statement.words[k], `${what} stands at a grid point, such as 3,6, from 0 to 200.`)
    return point
  }

  private rest(statement: Statement, k: number) {
    const word = statement.words[k]
    if (word) this.fail(statement, word, `“${word.text.slice(0, 30)}” is too much in this line.`)
    return word !== undefined
  }

  private port(statement: Statement, role: 'input' | 'output') {
    const name = statement.words[1]
    if (name?.text === '0') return this.fail(statement, name, 'The name 0 is kept for ground.')
    if (!name || !/^[A-Za-z][A-Za-z0-9_]{0,15}$/.test(name.text))
      return this.fail(
        statement,
        name,
        `An ${role} needs a name of letters and digits, such as ${role === 'input' ? 'in' : 'out'}.`,
      )
    const pair = statement.words[2]?.text === '+'
    if (pair && statement.words[4]?.text !== '-')
      return this.fail(statement, statement.words[4], `A pair is written as “${role} ${name.text} + 1,4 - 1,8”.`)
    const plus = this.point(statement, pair ? 3 : 2, `The ${role} ${name.text}`)
    const minus = pair ? this.point(statement, 5, `The minus side of ${name.text}`) : undefined
    if (!plus || minus === null || this.rest(statement, pair ? 6 : 3)) return
    this.circuit.ports.push({ role, name: name.text, plus, ...(minus ? { minus } : {}), span: statement.span })
  }

  private passive(statement: Statement, kind: PassiveKind) {
    const letter = statement.words[0]!.text
    const ref = statement.words[1]
    if (!ref || !new RegExp(`^${letter}[A-Za-z0-9_]{0,15}$`).test(ref.text))
      return this.fail(statement, ref, `The designator of a ${kind} begins with ${letter}, such as ${letter}1.`)
    const a = this.point(statement, 2, `A pin of ${ref.text}`)
    const b = this.point(statement, 3, `A pin of ${ref.text}`)
    if (!a || !b) return
    if (a.x !== b.x && a.y !== b.y)
      return this.fail(statement, statement.words[3], `${ref.text} lies aslant; parts are horizontal or vertical.`)
    if (Math.abs(a.x - b.x) + Math.abs(a.y - b.y) < 2)
      return this.fail(statement, statement.words[3], `The pins of ${ref.text} are less than 2 steps apart.`)
    const part: PassivePart = { kind, ref: ref.text, pins: [a, b], span: statement.span }
    if (statement.words[4]) {
      const side = SIDES.find((one) => one === statement.words[5]?.text)
      if (statement.words[4].text !== 'label' || !side)
        return this.fail(
          statement,
          statement.words[4],
          'After the pins only “label above”, below, left or right may follow.',
        )
      part.label = side
      if (this.rest(statement, 6)) return
    }
    this.circuit.parts.push(part)
  }

  private opamp(statement: Statement) {
    const [, ref, minusSign, , plusSign, , out] = statement.words
    if (!ref || !/^U[A-Za-z0-9_]{0,15}$/.test(ref.text))
      return this.fail(statement, ref, 'The designator of an op-amp begins with U, such as U1.')
    const form = 'An op-amp is written as “opamp U1 - 11,6 + 11,8 out 15,7”.'
    if (minusSign?.text !== '-' || plusSign?.text !== '+' || out?.text !== 'out')
      return this.fail(statement, minusSign?.text !== '-' ? minusSign : plusSign?.text !== '+' ? plusSign : out, form)
    const minus = this.point(statement, 3, `The inverting input of ${ref.text}`)
    const plus = this.point(statement, 5, `The non-inverting input of ${ref.text}`)
    const output = this.point(statement, 7, `The output of ${ref.text}`)
    if (!minus || !plus || !output) return
    const middle = (minus.y + plus.y) / 2
    if (minus.x !== plus.x || Math.abs(minus.y - plus.y) < 2 || output.y !== middle || Math.abs(output.x - minus.x) < 3)
      return this.fail(
        statement,
        statement.words[3],
        `The inputs of ${ref.text} stand above each other an even number of steps apart, its output 3 steps or more beside, half-way between them.`,
      )
    const part: OpampPart = { kind: 'opamp', ref: ref.text, minus, plus, out: output, span: statement.span }
    if (statement.words[8]) {
      if (statement.words[8].text !== 'supply')
        return this.fail(statement, statement.words[8], 'Only “supply 13,5 13,9” may follow the output.')
      const positive = this.point(statement, 9, `The positive supply pin of ${ref.text}`)
      const negative = this.point(statement, 10, `The negative supply pin of ${ref.text}`)
      if (!positive || !negative || this.rest(statement, 11)) return
      part.supply = [positive, negative]
    }
    this.circuit.parts.push(part)
  }

  private wire(statement: Statement) {
    const points = statement.words
      .slice(1)
      .map((word, k) => ({ word, point: this.point(statement, k + 1, 'Each corner of a wire') }))
    if (points.some(({ point }) => !point)) return
    if (points.length < 2) return this.fail(statement, undefined, 'A wire has two points or more.')
    for (let k = 1; k < points.length; k++) {
      const [a, b] = [points[k - 1]!.point!, points[k]!.point!]
      if (a.x !== b.x && a.y !== b.y)
        return this.fail(statement, points[k]!.word, 'Wires run horizontally or vertically; give the corner.')
      if (a.x === b.x && a.y === b.y) return this.fail(statement, points[k]!.word, 'This wire stands still here.')
    }
    this.circuit.wires.push({ points: points.map(({ point }) => point!), span: statement.span })
  }

  private ground(statement: Statement) {
    const at = this.point(statement, 1, 'A ground')
    if (at && !this.rest(statement, 2)) this.circuit.grounds.push({ at, span: statement.span })
  }

  private named(statement: Statement, keyword: 'reference' | 'supply' | 'name') {
    const name = statement.words[1]
    if (name?.text === '0') return this.fail(statement, name, 'The name 0 is kept for ground.')
    if (!name || !NODE_NAME.test(name.text))
      return this.fail(statement, name, `A ${keyword} has a name of letters and digits, such as Vref.`)
    const at = this.point(statement, 2, `The ${keyword} ${name.text}`)
    if (!at) return
    const word = statement.words[3]
    if (keyword === 'reference' && word?.text === 'through') {
      const through = statement.words[4]
      if (!through || !/^R[A-Za-z0-9_]{0,15}$/.test(through.text))
        return this.fail(
          statement,
          through,
          'After “through” stands the resistor that holds the reference, such as Rv.',
        )
      if (!this.rest(statement, 5))
        this.circuit.references.push({ name: name.text, at, through: through.text, span: statement.span })
      return
    }
    if (this.rest(statement, 3)) return
    const list = { reference: this.circuit.references, supply: this.circuit.supplies, name: this.circuit.names }[
      keyword
    ]
    list.push({ name: name.text, at, span: statement.span })
  }

  /** A drawing without a stated grid is as large as what it holds. */
  settleGrid() {
    const { circuit } = this
    const points = pointsOf(circuit)
    circuit.grid.width ||= points.reduce((most, { point }) => Math.max(most, point.x + 1), 4)
    circuit.grid.height ||= points.reduce((most, { point }) => Math.max(most, point.y + 1), 4)
  }
}
