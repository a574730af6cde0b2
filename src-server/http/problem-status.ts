import type { ProblemCode } from '#shared/problems'

/** HTTP status of each problem. */
export const PROBLEM_STATUS: Readonly<Record<ProblemCode, number>> = {
  'value-not-read': 422,
  'value-not-positive': 422,
  'value-out-of-range': 422,
  'unit-wrong': 422,
  'part-unknown': 422,
  'part-missing': 422,
  'result-unknown': 422,
  'target-not-settable': 422,
  'target-wrong-sign': 422,
  'condition-unknown': 422,
  'output-unknown': 422,
  'series-unknown': 422,
  'circuit-not-read': 422,
  'circuit-singular': 422,
  'calculator-not-read': 422,
  'formula-not-read': 422,
  'formula-dimension': 422,
  'page-not-read': 422,
  'request-not-valid': 400,
  'not-found': 404,
  'not-signed-in': 401,
  'role-too-low': 403,
  'sign-in-failed': 401,
  'too-many-attempts': 429,
  'cross-site': 403,
  'encoding-refused': 415,
  'media-type-refused': 415,
  'method-not-allowed': 405,
  'body-too-large': 413,
  'address-too-long': 414,
  'precondition-missing': 428,
  'precondition-failed': 412,
  'key-reused': 422,
  'limit-without-reason': 422,
  'database-away': 503,
  overloaded: 503,
  'not-foreseen': 500,
}

/** Seconds after which asking again makes sense, where the answer itself names none. */
export const RETRY_AFTER_SEC: Partial<Record<ProblemCode, number>> = {
  'database-away': 2,
  overloaded: 1,
  'too-many-attempts': 60,
}
