import type { RequestHandler } from 'express'
import { ProblemError } from '#shared/problems'

const ADDRESS_MAX = 8192
const METHODS = new Set(['GET', 'HEAD', 'POST', 'PUT', 'PATCH', 'DELETE'])

/** Refuses compressed bodies before any decoder can run: a decoder is the last thing that strangers should reach. */
export const refuseEncodedBodies: RequestHandler = (req, _res, next) => {
  const encoding = req.headers['content-encoding']
  if (encoding !== undefined && encoding.trim().toLowerCase() !== 'identity')
    throw new ProblemError('encoding-refused', 'Send the body as it is, without Content-Encoding.')
  next()
}

/** Refuses addresses that are too long or cannot be decoded. */
export const refuseBadAddresses: RequestHandler = (req, _res, next) => {
  if (req.url.length > ADDRESS_MAX)
    throw new ProblemError('address-too-long', `The address has more than ${ADDRESS_MAX} characters.`)
  let path: string
  try {
    path = decodeURIComponent(req.path)
  } catch {
    throw new ProblemError('request-not-valid', 'The address holds a percent sign that starts no valid character.')
  }
  if (path.includes('\0'))
    throw new ProblemError('request-not-valid', 'The address holds a character that is not text.')
  next()
}

/** Methods that no route here knows; OPTIONS too, since no other site may ask. */
export const isKnownMethod = (method: string): boolean => METHODS.has(method)
