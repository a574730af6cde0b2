import type { Request } from 'express'
import { ProblemError } from '#shared/problems'

/**
 * Refuses requests to /api that another site makes a browser send (OWASP, cross-site request forgery).
 *
 * Browsers name the relation in Sec-Fetch-Site; where they do not (plain http outside loopback), Origin must be our own
 * address. A request with neither header does not come from a page: it passes, and since every route that changes
 * something takes JSON alone, no form can pose as one. A script thus needs `Content-Type: application/json` and nothing
 * else.
 *
 * @param ownOrigin scheme, host and port under which pages are served
 * @throws {ProblemError} 'cross-site', or 'media-type-refused' for a change that is not sent as JSON
 */
export function requireSameSite(req: Request, ownOrigin: string): void {
  const isRead = req.method === 'GET' || req.method === 'HEAD'
  const relation = req.get('sec-fetch-site')
  const origin = req.get('origin')
  const fromHere =
    relation !== undefined
      ? relation === 'same-origin' || (isRead && relation === 'none')
      : origin === undefined || origin === ownOrigin
  if (!fromHere)
    throw new ProblemError('cross-site', 'Open the page at its own address; requests from other sites are refused.')
  if (!isRead && relation === undefined && origin === undefined && !req.is('application/json') && hasNoJsonType(req))
    throw new ProblemError('media-type-refused', 'Send it with Content-Type: application/json.')
}

/** `req.is` answers null without a body; the header counts there too. */
const hasNoJsonType = (req: Request): boolean => !/^application\/json\b/i.test(req.get('content-type') ?? '')
