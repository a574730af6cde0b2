import type { ProblemDocument } from '#shared/contracts/problem'

/** What kept a call from being answered, beside the server's own problem codes. */
export type ApiProblemCode = 'unreachable' | 'answer-not-understood' | (string & {})

/** A call that failed: the server's problem document, or our own words where none came. */
export class ApiProblem extends Error {
  constructor(
    readonly code: ApiProblemCode,
    readonly status: number,
    readonly problem: ProblemDocument,
    /** How long the server asks to wait. */
    readonly retryAfterMs: number | null = null,
  ) {
    super(problem.detail)
    this.name = 'ApiProblem'
  }

  /** The sentence for one field of the request, named by JSON pointer such as `#/values/Ri`. */
  fieldProblem(pointer: string): string | null {
    return this.problem.errors?.find((one) => one.pointer === pointer)?.detail ?? null
  }
}

/** No answer came at all. */
export const unreachable = (): ApiProblem =>
  ownProblem('unreachable', 0, 'The server cannot be reached', 'The server cannot be reached; what you typed is kept.')

/** The answer is not what this version of the page expects. */
export const answerNotUnderstood = (status: number): ApiProblem =>
  ownProblem(
    'answer-not-understood',
    status,
    'The answer was not understood',
    'The server answers in a way that this page does not know; reload it to get the version that fits.',
  )

const ownProblem = (code: string, status: number, title: string, detail: string): ApiProblem =>
  new ApiProblem(code, status, { type: `/problems/${code}`, title, status, instance: '', detail })
