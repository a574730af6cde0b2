import { FrontMatter } from '../contracts/front-matter'
import type { Problem, Reading } from '../problems'
import { readYaml } from './read-yaml'

/** A fenced widget with its text and the line of the page that its first line is on. */
export interface Fence {
  kind: 'circuit' | 'calculator' | 'limits'
  text: string
  line: number
}

export interface BlockLink {
  code: string
  revision: number | null
  line: number
  column: number
}

/** A name in the notes with its place in the page. */
export interface NamedPlace {
  name: string
  line: number
  column: number
}

/** A block page as written, taken apart; the notes stay Markdown. */
export interface PageSource {
  metadata: FrontMatter
  /** Markdown without the front matter. */
  body: string
  /** Line of the page that the body begins on. */
  bodyLine: number
  circuit: Fence
  calculator: Fence
  limits: Fence | null
  /** Names of `:value[name]`, with their places. */
  values: NamedPlace[]
  /** Names of `:formula[name]`, likewise. */
  formulas: NamedPlace[]
  links: BlockLink[]
}

export const PAGE_MAX = 256 * 1024

/**
 * Takes a page apart: YAML front matter, Markdown notes, one `circuit` and one `calculator` fence, perhaps `limits`.
 * @returns the parts, or every problem with its line and column in the page
 */
export function readPage(text: string): Reading<PageSource> {
  const problems: Problem[] = []
  const complain = (line: number, column: number, detail: string) =>
    problems.push({ code: 'page-not-read', detail, line, column })
  if (text.length > PAGE_MAX) complain(1, 1, `A page has at most ${PAGE_MAX} characters; this one has ${text.length}.`)
  if (problems.length) return { ok: false, problems: problems as [Problem, ...Problem[]] }
  const lines = text.replace(/^\ufeff/, '').split(/\r\n|\n|\r/)
  const end = lines[0] === '---' ? lines.indexOf('---', 1) : -1
  if (end < 0) complain(1, 1, 'A page begins with its front matter between two lines of three hyphens.')
  const metadata = end > 0 ? readFrontMatter(lines.slice(1, end).join('\n'), problems) : null
  const body = lines.slice(end + 1)
  const fences = readFences(body, end + 2, complain)
  const only = (kind: Fence['kind']) => {
    const found = fences.filter((fence) => fence.kind === kind)
    if (found.length > 1) complain(found[1]!.line - 1, 1, `A page has one ${kind} fence; this is the second.`)
    return found[0] ?? null
  }
  const circuit = only('circuit')
  const calculator = only('calculator')
  const limits = only('limits')
  if (!circuit) complain(end + 2, 1, 'The page has no circuit: begin one with three backquotes and “circuit”.')
  if (!calculator) complain(end + 2, 1, 'The page has no calculator: begin one with three backquotes and “calculator”.')
  if (problems.length || !metadata || !circuit || !calculator)
    return { ok: false, problems: problems as [Problem, ...Problem[]] }
  const { values, formulas, links } = readReferences(body, end + 2)
  return {
    ok: true,
    value: { metadata, body: body.join('\n'), bodyLine: end + 2, circuit, calculator, limits, values, formulas, links },
  }
}

function readFrontMatter(text: string, problems: Problem[]): FrontMatter | null {
  const yaml = readYaml(text, 2)
  if (!yaml.ok) {
    problems.push(...yaml.problems.map((one) => ({ ...one, code: 'page-not-read' as const })))
    return null
  }
  const parsed = FrontMatter.safeParse(yaml.value.value ?? {})
  if (parsed.success) return parsed.data
  for (const issue of parsed.error.issues) {
    const path = issue.path as (string | number)[]
    const name = path.length ? `${path.join('.')}: ` : ''
    problems.push({
      code: 'page-not-read',
      detail: `${name}${issue.message}${issue.message.endsWith('.') ? '' : '.'}`,
      ...yaml.value.positionOf(path),
    })
  }
  return null
}

const OPENING = /^ {0,3}(`{3,}|~{3,})\s*([^\s`]*)/
const WIDGETS: readonly string[] = ['circuit', 'calculator', 'limits']

/** Fences of widgets; other code fences are passed over whole. */
function readFences(
  lines: string[],
  firstLine: number,
  complain: (line: number, column: number, detail: string) => void,
): Fence[] {
  const fences: Fence[] = []
  for (let k = 0; k < lines.length; k++) {
    const opening = OPENING.exec(lines[k]!)
    if (!opening) continue
    const [, marks = '', info = ''] = opening
    const closing = new RegExp(`^ {0,3}${marks[0]}{${marks.length},}\\s*$`)
    let end = k + 1
    while (end < lines.length && !closing.test(lines[end]!)) end++
    if (end === lines.length && WIDGETS.includes(info)) complain(firstLine + k, 1, `This ${info} fence is not closed.`)
    if (WIDGETS.includes(info))
      fences.push({
        kind: info as Fence['kind'],
        text: `${lines.slice(k + 1, end).join('\n')}\n`,
        line: firstLine + k + 1,
      })
    k = end
  }
  return fences
}

const DIRECTIVE = /:(value|formula)\[([^\]\n]{1,40})\]/g
const LINK = /\]\(block:([a-z0-9-]{1,40})(?:@(\d{1,7}))?\)/gi

/** Live values, formulas and links to blocks in the notes, outside fences and code. */
function readReferences(lines: string[], firstLine: number) {
  const values: NamedPlace[] = []
  const formulas: NamedPlace[] = []
  const links: BlockLink[] = []
  let fence: string | null = null
  lines.forEach((line, k) => {
    const opening = OPENING.exec(line)
    if (fence !== null) {
      if (opening && opening[1]!.startsWith(fence) && opening[2] === '') fence = null
      return
    }
    if (opening) {
      fence = opening[1]!
      return
    }
    const prose = line.replace(/`[^`]*`/g, (code) => ' '.repeat(code.length))
    for (const match of prose.matchAll(DIRECTIVE)) {
      const list = match[1] === 'value' ? values : formulas
      list.push({ name: match[2]!, line: firstLine + k, column: match.index + 1 })
    }
    for (const match of prose.matchAll(LINK))
      links.push({
        code: match[1]!.toLowerCase(),
        revision: match[2] ? Number(match[2]) : null,
        line: firstLine + k,
        column: match.index + 3,
      })
  })
  return { values, formulas, links }
}
