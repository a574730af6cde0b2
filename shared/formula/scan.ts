import type { Reading } from '../problems'
import { unread } from '../problems'
import type { Literal } from './literal'
import { literalAt, matchAt } from './literal'
import { placeAt, quotedCharacter } from './place'
import type { FormulaKind } from './tree'
import { FUNCTIONS, OPAMP_DATA, RESERVED } from './vocabulary'

/** A piece of a formula; `column` counts from 1 through the whole text, line breaks included. */
export interface Token {
  kind: 'number' | 'name' | 'operator' | 'word'
  text: string
  column: number
  literal?: Literal
}

const TEXT_MAX = 2000
const TOKENS_MAX = 600
const DEPTH_MAX = 50

const NAME = /[A-Za-zΑ-Ωα-ω][A-Za-z0-9_Α-Ωα-ω]*/y
const OPERATOR = /<=|>=|==|!=|[-+*/^(),<>]/y

/** What to write instead of characters that look like an operator. */
const INSTEAD: Record<string, string> = {
  '×': '*',
  '·': '*',
  '⋅': '*',
  '÷': '/',
  '−': '-',
  '–': '-',
  '≤': '<=',
  '≥': '>=',
  '≠': '!=',
  '=': '==',
  '√': 'sqrt(…)',
  '²': '^2',
  '³': '^3',
  '∥': 'par(…, …)',
  '|': 'abs(…), par(…, …) or or',
  '&': 'and',
  '!': 'not',
}

/**
 * Cuts a formula into tokens of a closed alphabet, with literals already read, so that the parser never sees anything
 * else. Writing two things side by side is refused.
 */
export function scan(text: string, kind: FormulaKind): Reading<Token[]> {
  const fail = (detail: string, column: number) => unread('formula-not-read', detail, placeAt(text, column))
  if (text.length > TEXT_MAX)
    return unread(
      'formula-not-read',
      `A formula has at most ${TEXT_MAX} characters; this one has ${text.length}.`,
      placeAt(text.slice(0, TEXT_MAX), TEXT_MAX + 1),
    )
  const tokens: Token[] = []
  let depth = 0
  for (let at = 0; at < text.length;) {
    if (/\s/.test(text[at]!)) {
      at++
      continue
    }
    const column = at + 1
    const token = tokenAt(text, at, kind)
    if ('problem' in token) return fail(token.problem, column)
    if (depth === 0 && token.text === ',')
      return fail('A comma stands between the arguments of a function; the decimal mark is a point.', column)
    depth += token.text === '(' ? 1 : token.text === ')' ? -1 : 0
    if (depth > DEPTH_MAX) return fail(`Parentheses go at most ${DEPTH_MAX} deep.`, column)
    if (depth < 0) return fail('This parenthesis closes nothing.', column)
    const missing = missingBetween(tokens.at(-1), token)
    if (missing) return fail(missing, column)
    tokens.push(token)
    if (tokens.length > TOKENS_MAX) return fail(`A formula has at most ${TOKENS_MAX} parts.`, column)
    at += token.text.length
  }
  if (depth > 0) return fail('A parenthesis is not closed.', text.length + 1)
  if (tokens.length === 0) return fail('The formula is empty.', 1)
  return { ok: true, value: tokens }
}

function tokenAt(text: string, at: number, kind: FormulaKind): Token | { problem: string } {
  const column = at + 1
  const operator = matchAt(OPERATOR, text, at)
  if (operator) return { kind: 'operator', text: operator, column }
  const literal = literalAt(text, at, kind)
  if (literal)
    return literal.ok
      ? { kind: 'number', text: literal.value.text, column, literal: literal.value }
      : { problem: literal.detail }
  const name = matchAt(NAME, text, at)
  if (!name) return { problem: noMeaning(String.fromCodePoint(text.codePointAt(at)!)) }
  if (name === 'and' || name === 'or' || name === 'not') return { kind: 'word', text: name, column }
  if (RESERVED.includes(name)) return { problem: `“${name}” cannot be used as a name.` }
  return { kind: 'name', text: name, column }
}

function noMeaning(character: string): string {
  const instead = Object.hasOwn(INSTEAD, character) ? ` Write ${INSTEAD[character]}.` : ''
  return `${quotedCharacter(character)} has no meaning in a formula.${instead}`
}

/**
 * What is missing between two neighbours, as a sentence: an operator between two values or before a parenthesis that
 * calls nothing, a value before `and` and `or`. Null when they may stand so.
 */
function missingBetween(before: Token | undefined, token: Token): string | null {
  const endsValue = before !== undefined && (before.kind === 'number' || before.kind === 'name' || before.text === ')')
  // The parser would take such a word for a name.
  if (token.kind === 'word' && token.text !== 'not' && !endsValue) return `“${token.text}” joins two comparisons.`
  const startsValue = token.kind === 'number' || token.kind === 'name' || token.text === '('
  if (!endsValue || !startsValue) return null
  if (before.kind !== 'name' || token.text !== '(')
    return `An operator is missing between “${before.text}” and “${token.text}”. For a product write ${before.text}*${token.text}.`
  if (Object.hasOwn(FUNCTIONS, before.text) || Object.hasOwn(OPAMP_DATA, before.text)) return null
  return `There is no function ${before.text}. For a product write ${before.text}*(…).`
}
