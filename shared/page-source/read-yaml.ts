import { LineCounter, isMap, isScalar, isSeq, parseDocument, visit, type Document } from 'yaml'
import type { Problem, Reading } from '../problems'

export type Path = (string | number)[]

export interface PositionedYaml {
  value: unknown
  /** Line and column, in the page, of what stands at a path; of the nearest parent where the path does not exist. */
  positionOf: (path: Path) => { line: number; column: number }
}

const TEXT_MAX = 64 * 1024
const DEPTH_MAX = 12

/**
 * Reads YAML 1.2 with the position of each value.
 * @param firstLine line of the page that the text begins on
 */
export function readYaml(text: string, firstLine = 1): Reading<PositionedYaml> {
  const fail = (detail: string, line: number, column: number): { ok: false; problems: [Problem] } => ({
    ok: false,
    problems: [{ code: 'calculator-not-read', detail, line: line + firstLine - 1, column }],
  })
  if (text.length > TEXT_MAX)
    return fail(`This text has ${text.length} characters; at most ${TEXT_MAX} are read.`, 1, 1)
  const deep = deepestLine(text)
  if (deep) return fail(`This goes more than ${DEPTH_MAX} levels deep.`, deep, 1)
  const lines = new LineCounter()
  const document = parseDocument(text, {
    lineCounter: lines,
    uniqueKeys: true,
    prettyErrors: false,
    strict: true,
    logLevel: 'error',
  })
  const first = document.errors[0]
  if (first) {
    const at = lines.linePos(first.pos[0])
    return fail(`The YAML cannot be read here: ${firstSentence(first.message)}`, at.line, at.col)
  }
  const reserved = reservedKey(document)
  if (reserved !== null) {
    const at = lines.linePos(reserved)
    return fail('The name __proto__ cannot be used.', at.line, at.col)
  }
  let value: unknown
  try {
    value = document.toJS({ maxAliasCount: 20 })
  } catch {
    return fail('This YAML refers to itself too often.', 1, 1)
  }
  const positionOf = (path: Path) => {
    let node: unknown = document.contents
    let offset = offsetOf(node)
    for (const step of path) {
      if (isMap(node)) {
        const pair = node.items.find((item) => (isScalar(item.key) ? String(item.key.value) : '') === String(step))
        if (!pair) break
        offset = offsetOf(pair.value) ?? offsetOf(pair.key) ?? offset
        node = pair.value
      } else if (isSeq(node)) {
        node = node.items[Number(step)]
        offset = offsetOf(node) ?? offset
      } else break
    }
    const at = lines.linePos(offset ?? 0)
    return { line: at.line + firstLine - 1, column: at.col }
  }
  return { ok: true, value: { value, positionOf } }
}

const offsetOf = (node: unknown): number | undefined => {
  const range = (node as { range?: [number, number, number] } | null)?.range
  if (!range) return undefined
  const quoted = isScalar(node) && (node.type === 'QUOTE_DOUBLE' || node.type === 'QUOTE_SINGLE')
  return range[0] + (quoted ? 1 : 0)
}

/** Place of a key that means something to the language we are written in; others are plain names. */
function reservedKey(document: Document): number | null {
  let at: number | null = null
  visit(document, {
    Pair(_, { key }) {
      if (!isScalar(key) || key.value !== '__proto__') return undefined
      at = offsetOf(key) ?? 0
      return visit.BREAK
    },
  })
  return at
}

const firstSentence = (message: string) => {
  const text = message.split('\n')[0]!.trim()
  return /[.!?]$/.test(text) ? text : `${text}.`
}

/** First line with brackets or indentation deeper than is taken, so that the parser is never led down. */
function deepestLine(text: string): number | null {
  let open = 0
  const lines = text.split('\n')
  for (let k = 0; k < lines.length; k++) {
    const line = lines[k]!
    open += (line.match(/[[{]/g)?.length ?? 0) - (line.match(/[\]}]/g)?.length ?? 0)
    const dashes = /^[\s-]*/.exec(line)![0]
    if (open > DEPTH_MAX || dashes.length > 8 * DEPTH_MAX || (dashes.match(/-/g)?.length ?? 0) > DEPTH_MAX) return k + 1
  }
  return null
}
