import type { ErrorRequestHandler, Request, Response } from 'express'
import type { ProblemDocument } from '#shared/contracts/problem'
import { PROBLEM_TITLES, ProblemError, type ProblemCode } from '#shared/problems'
import { problemOfDatabase } from '../database'
import { PROBLEM_STATUS, RETRY_AFTER_SEC } from './problem-status'

/** The problem document (RFC 9457) of an error, for one request. */
export function problemDocument(error: ProblemError, requestId: string): ProblemDocument {
  const placed = error.problems.filter((one) => one.pointer !== undefined || one.line !== undefined)
  return {
    type: `/problems/${error.code}`,
    title: PROBLEM_TITLES[error.code],
    status: PROBLEM_STATUS[error.code],
    instance: `/requests/${requestId}`,
    detail: error.detail,
    ...(placed.length > 0 && {
      errors: placed.map(({ pointer, line, column, detail }) => ({
        ...(pointer !== undefined && { pointer }),
        ...(line !== undefined && { line }),
        ...(column !== undefined && { column }),
        detail,
      })),
    }),
  }
}

/** Answers with a problem document. */
export function sendProblem(req: Request, res: Response, error: ProblemError): void {
  const retrySec = RETRY_AFTER_SEC[error.code]
  if (retrySec !== undefined && !res.hasHeader('Retry-After')) res.setHeader('Retry-After', String(retrySec))
  res
    .status(PROBLEM_STATUS[error.code])
    .set('Cache-Control', 'no-store')
    .type('application/problem+json')
    .send(JSON.stringify(problemDocument(error, String(req.id))))
}

const PARSER_PROBLEMS: Readonly<Record<string, [ProblemCode, string]>> = {
  'entity.too.large': ['body-too-large', 'The request body is larger than what is taken here (1 MB).'],
  'encoding.unsupported': ['encoding-refused', 'Send the body as it is, without Content-Encoding.'],
  'charset.unsupported': ['media-type-refused', 'Send JSON in UTF-8.'],
  'entity.parse.failed': ['request-not-valid', 'The body is not JSON; check quotes, commas and braces.'],
  'request.size.invalid': ['request-not-valid', 'The body is not as long as Content-Length says.'],
  'request.aborted': ['request-not-valid', 'The body ended early.'],
}

/** Any error as a problem; what nobody foresaw tells nothing but its request number. */
export function problemOf(error: unknown): ProblemError {
  if (error instanceof ProblemError) return error
  const { type, status } = (error ?? {}) as { type?: string; status?: number }
  const parsed = type ? PARSER_PROBLEMS[type] : undefined
  if (parsed) return new ProblemError(...parsed)
  if (error instanceof URIError || status === 400)
    return new ProblemError('request-not-valid', 'The request could not be read.')
  return (
    problemOfDatabase(error) ??
    new ProblemError('not-foreseen', 'Something went wrong here; the request number finds it in the log.')
  )
}

/** The one error handler: everything that was thrown becomes a problem document. */
export const answerErrors: ErrorRequestHandler = (error, req, res, _next) => {
  const problem = problemOf(error)
  if (problem.code === 'not-foreseen') req.log.error({ err: error }, 'not foreseen')
  else if (PROBLEM_STATUS[problem.code] >= 500) req.log.warn({ problem: problem.code }, problem.detail)
  if (res.headersSent) return void res.destroy()
  sendProblem(req, res, problem)
}
