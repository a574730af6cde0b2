import { createHash } from 'node:crypto'
import { ENGINE_VERSION, defaultValues, plotFrequencies, selfCheck, stageResponse } from '#shared/stage/index'
import type { Block } from '#shared/page-source/read-block'
import { TRADE_WORDS, wordsOf } from '../search'

const SKETCH_POINTS = 48
const FLOOR_DB = -400

/** SHA-256 of a page, in hexadecimal. */
export const hashOf = (text: string): string => createHash('sha256').update(text).digest('hex')

/** What a revision row takes from its page: metadata, search texts, self-check, sketch. */
export function pageColumns({ page, stage }: Block) {
  const { metadata, body } = page
  const values = defaultValues(stage)
  const response = stageResponse(stage, values, {}, stage.plot.output, plotFrequencies(stage, values, SKETCH_POINTS))
  const names = [
    metadata.code,
    ...metadata.tags,
    ...metadata.aliases,
    metadata.function,
    metadata.topology,
    TRADE_WORDS[metadata.function] ?? '',
  ]
  const parts = [
    ...stage.parts.flatMap((part) => [part.name, ...part.refs]),
    ...stage.opamps,
    ...stage.results.map((one) => one.name),
  ]
  return {
    format: metadata.format,
    title: metadata.title,
    function: metadata.function,
    topology: metadata.topology,
    order: metadata.order,
    tags: metadata.tags,
    aliases: metadata.aliases,
    owner: metadata.owner,
    summary: metadata.summary,
    source: body,
    selfCheck: selfCheck(stage, values),
    engineVersion: ENGINE_VERSION,
    sketchDb: response.re.map((re, k) => Math.max(FLOOR_DB, 20 * Math.log10(Math.hypot(re, response.im[k]!)))),
    searchTitle: metadata.title,
    searchWords: [...names, ...wordsOf(names.join(' '))].join(' '),
    searchParts: [...new Set(parts)].join(' '),
    searchNotes: `${metadata.summary} ${plainNotes(body)}`,
  }
}

/** Notes without fences and marks, for searching and for excerpts. */
const plainNotes = (body: string): string =>
  body
    .replace(/^ {0,3}(`{3,}|~{3,})[^\n]*\n[\s\S]*?^ {0,3}\1[`~]*\s*$/gm, ' ')
    .replace(/:(?:value|formula)\[([^\]\n]*)\]/g, '$1')
    .replace(/\]\([^)\n]*\)/g, ' ')
    .replace(/[*_`#[\]|>$]/g, ' ')
    .replace(/\s+/g, ' ')
    .trim()
