/** Permanent catalogue of problem codes; each is served as a page under /problems/CODE. */
export const PROBLEM_TITLES = {
  'value-not-read': 'A value could not be read',
  'value-not-positive': 'A value must be above zero',
  'value-out-of-range': 'A value is outside what can be built',
  'unit-wrong': 'A value has the wrong unit',
  'part-unknown': 'No such part in this block',
  'part-missing': 'A part has no value',
  'result-unknown': 'No such result in this block',
  'target-not-settable': 'This result cannot be a target',
  'target-wrong-sign': 'A target has the wrong sign',
  'condition-unknown': 'No such condition',
  'output-unknown': 'No such output in this block',
  'series-unknown': 'No such preferred series',
  'circuit-not-read': 'The circuit text has errors',
  'circuit-singular': 'The circuit has no unique solution',
  'circuit-too-large': 'The circuit is too large for this computation',
  'calculator-not-read': 'The calculator text has errors',
  'formula-not-read': 'A formula could not be read',
  'formula-dimension': 'The dimensions of a formula do not fit',
  'page-not-read': 'The page source has errors',
  'request-not-valid': 'The request does not have the expected form',
  'not-found': 'Nothing is here',
  'not-signed-in': 'Sign-in is needed',
  'role-too-low': 'Your role does not allow this',
  'sign-in-failed': 'Sign-in failed',
  'too-many-attempts': 'Too many attempts',
  'cross-site': 'The request came from another site',
  'encoding-refused': 'Compressed request bodies are refused',
  'media-type-refused': 'Only JSON is taken here',
  'method-not-allowed': 'This method is not served here',
  'body-too-large': 'The request is too large',
  'address-too-long': 'The address is too long',
  'precondition-missing': 'The request must name the version it changes',
  'precondition-failed': 'Somebody changed this meanwhile',
  'key-reused': 'The same key was used for another request',
  'limit-without-reason': 'A sizing outside a limit needs a reason',
  'database-away': 'The database does not answer',
  overloaded: 'Too much at once',
  'not-foreseen': 'Something unforeseen happened',
} as const

export type ProblemCode = keyof typeof PROBLEM_TITLES

/** Where in a text or a request: a JSON pointer, or line and column (both from 1). */
export interface Where {
  pointer?: string
  line?: number
  column?: number
}

/** One thing that is wrong, as a full sentence that says what was understood and what would do. */
export interface Problem extends Where {
  code: ProblemCode
  detail: string
}

/** The outcome of reading what people typed: never an exception. */
export type Reading<T> = { ok: true; value: T } | { ok: false; problems: [Problem, ...Problem[]] }

/** The one error class of engine and server. */
export class ProblemError extends Error {
  readonly problems: [Problem, ...Problem[]]
  constructor(
    readonly code: ProblemCode,
    readonly detail: string,
    where: Where = {},
    more: Problem[] = [],
  ) {
    super(detail)
    this.name = 'ProblemError'
    this.problems = [{ code, detail, ...where }, ...more]
  }
}

/** A failed reading with one problem. */
export const unread = (code: ProblemCode, detail: string, where: Where = {}): { ok: false; problems: [Problem] } => ({
  ok: false,
  problems: [{ code, detail, ...where }],
})

/** Raises what a reading found wrong, or gives its value. @throws {ProblemError} with all problems of the reading */
export function valueOf<T>(reading: Reading<T>): T {
  if (reading.ok) return reading.value
  const [first, ...more] = reading.problems
  throw new ProblemError(first.code, first.detail, first, more)
}
