import type { RequestHandler } from 'express'
import helmet from 'helmet'

export const CSP_REPORT_PATH = '/csp-reports'

/**
 * Headers on every answer. The policy is written out whole; inline styles are allowed because formulas, plots and the
 * component library set style attributes, inline scripts are not. No upgrade-insecure-requests: it would break plain
 * http on a house network.
 * @param overHttps whether people reach us by https: then, and only then, browsers are told to insist on it
 */
export function securityHeaders(overHttps: boolean): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'none'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", 'data:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        workerSrc: ["'self'"],
        manifestSrc: ["'self'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        objectSrc: ["'none'"],
        reportUri: [CSP_REPORT_PATH],
      },
    },
    referrerPolicy: { policy: 'same-origin' },
    crossOriginOpenerPolicy: { policy: 'same-origin' },
    crossOriginResourcePolicy: { policy: 'same-origin' },
    strictTransportSecurity: overHttps ? { maxAge: 31_536_000, includeSubDomains: false } : false,
    xFrameOptions: { action: 'deny' },
  })
}
