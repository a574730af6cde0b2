import { ProblemError } from '#shared/problems'

interface DatabaseError extends Error {
  code?: string
  errno?: number
  fatal?: boolean
}

/** Raised when no connection was to be had within the deadline. */
export class AcquireDeadlineError extends Error {
  readonly code = 'POOL_DEADLINE'
}

/** Deadlock (under Galera also at COMMIT), lock wait, snapshot passed by, node not ready. */
const RETRIED_NUMBERS = new Set([1213, 1205, 1020, 1047])

/** The server is stopping, full, or ended this connection. */
const LOST_NUMBERS = new Set([1053, 1040, 1077, 1152, 1158, 1159, 1160, 1161, 1184, 1927, 4031, 2006, 2013])
const LOST_CODES = new Set([
  'PROTOCOL_CONNECTION_LOST',
  'PROTOCOL_SEQUENCE_TIMEOUT',
  'ECONNRESET',
  'ECONNREFUSED',
  'ENOENT',
  'EPIPE',
  'ETIMEDOUT',
  'EHOSTUNREACH',
  'ENETUNREACH',
  'ENOTFOUND',
  'EAI_AGAIN',
])

/** No schema, no tables or no rights yet: the migration has not run, or the account is wrong. */
const UNPREPARED_NUMBERS = new Set([1045, 1044, 1049, 1142, 1146, 1698])

/** The database's own error under what the query builder wrapped around it. */
export function databaseErrorOf(error: unknown): DatabaseError | null {
  for (let one: unknown = error, depth = 0; one instanceof Error && depth < 5; one = one.cause, depth += 1) {
    const { code, errno } = one as DatabaseError
    if (typeof errno === 'number' || (typeof code === 'string' && (LOST_CODES.has(code) || code.startsWith('ER_'))))
      return one as DatabaseError
    if (one instanceof AcquireDeadlineError || /Queue limit reached|closed state|Pool is closed/.test(one.message))
      return one as DatabaseError
  }
  return null
}

/** Whether the connection is gone, or can no longer be trusted. */
export function isConnectionLost(error: unknown): boolean {
  const found = databaseErrorOf(error)
  if (!found) return false
  return (
    LOST_NUMBERS.has(found.errno ?? 0) || LOST_CODES.has(found.code ?? '') || /closed state|Pool is/.test(found.message)
  )
}

/** Whether the whole transaction may be run again from its start. */
export const isRetried = (error: unknown): boolean => RETRIED_NUMBERS.has(databaseErrorOf(error)?.errno ?? 0)

/** Whether a unique key refused the row. */
export const isDuplicate = (error: unknown): boolean => databaseErrorOf(error)?.errno === 1062

/** What a database error means to the person who asked; null when it is a fault of the program. */
export function problemOfDatabase(error: unknown): ProblemError | null {
  const found = databaseErrorOf(error)
  if (!found) return null
  if (isRetried(found))
    return new ProblemError('overloaded', 'Too many changes met at the same record; trying again in a moment will do.')
  if (found instanceof AcquireDeadlineError || /Queue limit/.test(found.message))
    return new ProblemError(
      'database-away',
      'The database has no free connection at the moment; trying again in a moment will do.',
    )
  if (isConnectionLost(found) || UNPREPARED_NUMBERS.has(found.errno ?? 0))
    return new ProblemError(
      'database-away',
      'The database does not answer at the moment; what you typed is still in your browser.',
    )
  return null
}
