import type { Reading } from '../problems'
import { unread } from '../problems'
import { readQuantity } from '../quantities/read'
import type { Unit } from '../quantities/unit'
import { FUNCTIONS, OPAMP_DATA, RESERVED } from './vocabulary'

export interface Token {
  kind: 'number' | 'name' | 'operator' | 'word'
  text: string
  column: number
  value?: number
  unit?: Unit | null
  prefixed?: boolean
}

const TEXT_MAX = 2000
const TOKENS_MAX = 600
const DEPTH_MAX = 50

const NAME = /[\p{Script=Latin}\p{Script=Greek}][\p{Script=Latin}\p{Script=Greek}0-9_]*/uy
const OPERATOR = /<=|>=|==|!=|[-+*/^(),<>]/y
const NUMBER = /(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/y
/** Prefix and unit, or an IEC 60062 letter code, right after the digits or one space on. */
const TAIL =
  / ?(?:meg|[TGMkKmµμunpf])?(?:Hz|Ω|Ω|ohm|F|H|V\/s|V|A|s|K|W|%)(?![\p{L}\p{N}_])|[TGMkKmµμunpfR]\d*(?![\p{L}\p{N}_])|meg(?![\p{L}\p{N}_])| (?:[TGMkKmµμunpf])(?![\p{L}\p{N}_(])/uy
const LITERAL_UNITS: Unit[] = ['Hz', 'Ω', 'F', 'H', 's', 'V', 'A', 'K', 'V/s', 'W', '%']

/**
 * Cuts a formula into tokens of a closed alphabet, with literals already read, so that the parser never sees anything
 * else. Writing two things side by side is refused.
 */
export function scan(text: string): Reading<Token[]> {
  const fail = (detail: string, column: number) => unread('formula-not-read', detail, { line: 1, column })
  if (text.length > TEXT_MAX)
    return fail(`A formula has at most ${TEXT_MAX} characters; this one has ${text.length}.`, TEXT_MAX)
  const tokens: Token[] = []
  let depth = 0
  for (let at = 0; at < text.length;) {
    if (/\s/.test(text[at]!)) {
      at++
      continue
    }
    const column = at + 1
    const token = scanOne(text, at)
    if (!token) return fail(`“${String.fromCodePoint(text.codePointAt(at)!)}” has no meaning in a formula.`, column)
    if ('problem' in token) return fail(token.problem, column)
    depth += token.text === '(' ? 1 : token.text === ')' ? -1 : 0
    if (depth > DEPTH_MAX) return fail(`Parentheses go at most ${DEPTH_MAX} deep.`, column)
    if (depth < 0) return fail('This parenthesis closes nothing.', column)
    const before = tokens.at(-1)
    if (before && standsBeside(before, token))
      return fail(
        `An operator is missing between “${before.text}” and “${token.text}”. Write ${before.text}*${token.text}.`,
        column,
      )
    tokens.push(token)
    if (tokens.length > TOKENS_MAX) return fail(`A formula has at most ${TOKENS_MAX} parts.`, column)
    at += token.text.length
  }
  if (depth > 0) return fail('A parenthesis is not closed.', text.length + 1)
  if (tokens.length === 0) return fail('The formula is empty.', 1)
  return { ok: true, value: tokens }
}

function scanOne(text: string, at: number): Token | { problem: string; text: string } | null {
  const column = at + 1
  const operator = match(OPERATOR, text, at)
  if (operator) return { kind: 'operator', text: operator, column }
  const number = match(NUMBER, text, at)
  if (number) return scanLiteral(text, at, number)
  const name = match(NAME, text, at)
  if (!name) return null
  if (name === 'and' || name === 'or' || name === 'not') return { kind: 'word', text: name, column }
  if (RESERVED.includes(name)) return { problem: `“${name}” cannot be used as a name.`, text: name }
  return { kind: 'name', text: name, column }
}

function scanLiteral(text: string, at: number, number: string): Token | { problem: string; text: string } {
  const tail = match(TAIL, text, at + number.length) ?? ''
  const literal = number + tail
  const column = at + 1
  const next = text.slice(at + literal.length, at + literal.length + 1)
  if (/[\p{L}\p{N}_.]/u.test(next))
    return { problem: `“${literal}${next}…” is not a value. Write a product with *.`, text: literal }
  const plain = readQuantity(literal, '')
  if (tail === '' || (plain.ok && !/\d$/.test(tail)))
    return plain.ok
      ? { kind: 'number', text: literal, column, value: plain.value, unit: null, prefixed: tail !== '' }
      : { problem: plain.problems[0].detail, text: literal }
  for (const unit of LITERAL_UNITS) {
    const reading = readQuantity(literal, unit, { allowZero: true })
    if (!reading.ok) continue
    const coded = /\d$/.test(tail)
    // 4k7 fits a resistance and a frequency: a code says how much, not of what.
    return {
      kind: 'number',
      text: literal,
      column,
      value: unit === '%' ? reading.value / 100 : reading.value,
      unit: coded ? null : unit,
      prefixed: coded,
    }
  }
  return { problem: `“${literal}” is not a value.`, text: literal }
}

function match(pattern: RegExp, text: string, at: number): string | null {
  pattern.lastIndex = at
  return pattern.exec(text)?.[0] ?? null
}

/** Two things that are both values, or a value and an opening parenthesis that calls nothing. */
function standsBeside(before: Token, token: Token): boolean {
  const endsValue = before.kind === 'number' || before.kind === 'name' || before.text === ')'
  const startsValue = token.kind === 'number' || token.kind === 'name' || token.text === '('
  if (!endsValue || !startsValue) return false
  return !(
    before.kind === 'name' &&
    token.text === '(' &&
    (Object.hasOwn(FUNCTIONS, before.text) || Object.hasOwn(OPAMP_DATA, before.text))
  )
}
