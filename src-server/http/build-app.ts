import { randomUUID } from 'node:crypto'
import express, { type Express, type RequestHandler } from 'express'
import type { Logger } from 'pino'
import { pinoHttp } from 'pino-http'
import { ProblemError } from '#shared/problems'
import { clientFiles } from './client-files'
import { isKnownMethod, refuseBadAddresses, refuseEncodedBodies } from './first-gates'
import { answerErrors } from './problem-answer'
import { register, type RegisterNeeds } from './register'
import type { Method, Route } from './route'
import { securityHeaders } from './security-headers'

export interface AppNeeds extends RegisterNeeds {
  log: Logger
  overHttps: boolean
  /** Express's trust proxy: whose X-Forwarded-* headers count. */
  trustProxy: false | string | number
  clientFolder: string
  routes: Route[]
}

/** The Express application: gates, routes, the built client, and a problem document for everything else. */
export function buildApp(needs: AppNeeds): Express {
  const app = express()
  app.set('etag', false)
  app.set('x-powered-by', false)
  app.set('trust proxy', needs.trustProxy)
  app.set('query parser', 'simple')
  app.use(requestLog(needs.log), securityHeaders(needs.overHttps), refuseEncodedBodies, refuseBadAddresses)
  app.use((req, res, next) => {
    if (isKnownMethod(req.method)) return next()
    refuseMethod(app, req.path, res.setHeader.bind(res), ['GET', 'HEAD'])
  })
  for (const one of needs.routes) register(app, one, needs)
  app.use((req, res, next) => {
    if (methodsAt(app, req.path).length > 0) refuseMethod(app, req.path, res.setHeader.bind(res))
    next()
  })
  app.use(...clientFiles(needs.clientFolder))
  app.use(() => {
    throw new ProblemError('not-found', 'Nothing is at this address.')
  })
  app.use(answerErrors)
  return app
}

interface RouterLayer {
  route?: { path: string; methods: Record<string, boolean> }
  match(path: string): boolean
}
const layersOf = (app: Express): RouterLayer[] => (app.router as unknown as { stack: RouterLayer[] }).stack

/** Every route that Express serves, read from its own table, so that none can hide. */
export function routesOf(app: Express): { method: Method; path: string }[] {
  return layersOf(app).flatMap(({ route }) =>
    route
      ? Object.keys(route.methods).map((method) => ({ method: method.toUpperCase() as Method, path: route.path }))
      : [],
  )
}

function methodsAt(app: Express, path: string): string[] {
  const methods = layersOf(app)
    .filter((layer) => layer.route && layer.match(path))
    .flatMap((layer) => Object.keys(layer.route!.methods).map((method) => method.toUpperCase()))
  return [...new Set(methods.includes('GET') ? [...methods, 'HEAD'] : methods)]
}

function refuseMethod(
  app: Express,
  path: string,
  setHeader: (name: string, value: string) => unknown,
  otherwise: string[] = [],
): never {
  const allowed = methodsAt(app, path)
  setHeader('Allow', (allowed.length > 0 ? allowed : otherwise).join(', '))
  throw new ProblemError('method-not-allowed', `Served here: ${(allowed.length > 0 ? allowed : otherwise).join(', ')}.`)
}

/** One JSON line a request: nothing of headers, query or body, so that no secret can reach the log. */
function requestLog(log: Logger): RequestHandler {
  return pinoHttp({
    logger: log,
    genReqId: () => randomUUID(),
    quietReqLogger: true,
    customAttributeKeys: { reqId: 'request' },
    customLogLevel: (_req, res, error) => (error || res.statusCode >= 500 ? 'warn' : 'info'),
    serializers: {
      req: (req: { method: string; url: string; raw: { ip?: string; user?: { id: number } } }) => ({
        method: req.method,
        path: req.url.split('?')[0]!.slice(0, 300),
        address: req.raw.ip,
        person: req.raw.user?.id,
      }),
      res: (res: { statusCode: number }) => ({ status: res.statusCode }),
    },
  }) as unknown as RequestHandler
}
