import { RateLimiterMemory } from 'rate-limiter-flexible'
import { z } from 'zod'
import { ProblemError } from '#shared/problems'
import { CSP_REPORT_PATH } from './security-headers'
import { route } from './route'

const KEPT = 100
const Report = z.union([z.record(z.string(), z.unknown()), z.array(z.unknown())])

/** What browsers report about the content security policy: counted, the last ones kept, each logged. */
export function cspReportLog() {
  const recent: string[] = []
  let count = 0
  return {
    count: () => count,
    recent: () => [...recent],
    add(report: string) {
      count += 1
      recent.push(report)
      if (recent.length > KEPT) recent.shift()
    },
  }
}
export type CspReportLog = ReturnType<typeof cspReportLog>

/** Open to all, as reports come without sign-in; so limited in size and number. */
export function cspReportRoutes(reports: CspReportLog) {
  const limiter = new RateLimiterMemory({ points: 60, duration: 60 })
  return [
    route(
      `POST ${CSP_REPORT_PATH}`,
      {
        role: 'none',
        takes: ['application/csp-report', 'application/reports+json', 'application/json'],
        bodyLimit: '16kb',
        body: Report,
        answer: { 204: null },
      },
      async ({ body, request }) => {
        await limiter.consume(request.address).catch(() => {
          throw new ProblemError('too-many-attempts', 'That is more reports than are read.')
        })
        const text = JSON.stringify(body).slice(0, 2000)
        reports.add(text)
        request.log.warn({ report: text }, 'content security policy report')
      },
    ),
  ]
}
