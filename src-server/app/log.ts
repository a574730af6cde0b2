import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import { pino, type Logger } from 'pino'
import type { Configuration } from './configuration'

const SECRET_NAMES = [
  'password',
  'passwordHash',
  'token',
  'cookie',
  'authorization',
  'secret',
  'pepper',
  'source',
  'body',
]

/** A string in the log is cut, so that nobody fills the disk with one request. */
const TEXT_MAX = 2000

/**
 * One JSON line an event, UTC, in the data folder or on standard output. Errors tell type, message and stack, not the
 * statement's values: those are what people typed.
 */
export function openLog({ logLevel, logTo, dataDir }: Pick<Configuration, 'logLevel' | 'logTo' | 'dataDir'>): Logger {
  if (logTo === 'file') mkdirSync(join(dataDir, 'log'), { recursive: true, mode: 0o700 })
  const destination =
    logTo === 'file'
      ? pino.destination({ dest: join(dataDir, 'log', 'poleshelf.log'), sync: true, mode: 0o600 })
      : pino.destination({ dest: 1, sync: true })
  // A full disk or a closed pipe costs lines of the log, never the service.
  destination.on('error', () => {})
  return pino(
    {
      level: logLevel,
      base: { process: process.pid },
      timestamp: pino.stdTimeFunctions.isoTime,
      redact: { paths: SECRET_NAMES.flatMap((name) => [name, `*.${name}`, `*.*.${name}`]), censor: '(not logged)' },
      serializers: { err: errorFacts },
    },
    destination,
  )
}

function errorFacts(error: unknown): Record<string, unknown> {
  if (!(error instanceof Error)) return { message: String(error).slice(0, TEXT_MAX) }
  const { code, errno } = error as { code?: unknown; errno?: unknown }
  // The query builder's message holds the statement's values; its cause tells what went wrong.
  const isQuery = 'params' in error && 'query' in error
  const message = isQuery ? 'a statement failed' : error.message.slice(0, TEXT_MAX)
  return {
    type: error.name,
    message,
    ...(code !== undefined && { code }),
    ...(errno !== undefined && { errno }),
    stack: (error.stack ?? '')
      .split('\n')
      .filter((line) => /^\s+at /.test(line))
      .join('\n')
      .slice(0, TEXT_MAX),
    ...(error.cause !== undefined && { cause: errorFacts(error.cause) }),
  }
}
