import { join } from 'node:path'
import type { Express } from 'express'
import type { Logger } from 'pino'
import { blockRepository, blockRoutes, blockService, loadSeedBlocks } from '../blocks'
import { computeRoutes, computeService } from '../compute'
import { connectionOptions } from '../database/pool'
import { openDatabase } from '../database'
import { documentRoutes } from '../documents'
import { buildApp, cspReportLog, cspReportRoutes, idempotency } from '../http'
import { pageRenderer } from '../page-rendering'
import { makeDemonstrationPeople, peopleRepository } from '../people'
import { BCRYPT_COST, passwordHasher, signInFeature } from '../sign-in'
import { sizingRepository, sizingRoutes, sizingService } from '../sizings'
import type { Configuration } from './configuration'
import { healthRoutes } from './health'
import { secretsOf } from './secrets'

export interface AssemblyOptions {
  configuration: Configuration
  /** Address of every permanent link: scheme, host and port. */
  baseUrl: string
  log: Logger
  now?: () => Date
  /** Cost of password hashes; lower in tests alone. */
  bcryptCost?: number
  /** Holds answers against their contracts: in tests. */
  checkAnswers?: boolean
  /** F2: off in tests of servers that do not know it. */
  snapshotIsolation?: boolean
}

const SWEEP_EVERY_MS = 10 * 60_000

/** Makes the services and hands one to another; nothing else does. */
export async function assemble({ configuration, baseUrl, log, ...options }: AssemblyOptions) {
  const now = options.now ?? (() => new Date())
  const overHttps = baseUrl.startsWith('https:')
  const { sessionSecret, pepper } = await secretsOf(configuration)
  const database = openDatabase({
    url: configuration.databaseUrl,
    runtimeUrl: configuration.databaseRuntimeUrl,
    connections: configuration.databaseConnections,
    migrations: configuration.migrations,
    log,
    ...(options.snapshotIsolation !== undefined && { snapshotIsolation: options.snapshotIsolation }),
  })
  let stopping = false

  const people = peopleRepository
  const hasher = passwordHasher({ pepper, cost: options.bcryptCost ?? BCRYPT_COST })
  const reports = cspReportLog()
  const answersByKey = idempotency(database.queries, now)
  const signIn = signInFeature({
    database,
    databaseName: connectionOptions(configuration.databaseRuntimeUrl).database ?? '',
    people,
    hasher,
    limits: { idleMs: configuration.sessionIdleMs, absoluteMs: configuration.sessionAbsoluteMs },
    secret: sessionSecret,
    overHttps,
    now,
    onTouchFailure: (error) => log.warn({ err: error }, 'session not touched'),
  })

  const renderPage = pageRenderer()
  const blocks = blockService({ database, blocks: blockRepository, renderPage })
  const compute = computeService({ blocks })
  const sizings = sizingService({ database, blocks, sizings: sizingRepository, baseUrl, now })

  const app: Express = buildApp({
    log,
    overHttps,
    ownOrigin: new URL(baseUrl).origin,
    trustProxy: configuration.trustProxy,
    clientFolder: configuration.clientFolder,
    session: signIn.session,
    idempotency: answersByKey,
    databaseIsReady: database.isReady,
    checkAnswers: options.checkAnswers ?? false,
    routes: [
      ...healthRoutes({ database, isStopping: () => stopping }),
      ...cspReportRoutes(reports),
      ...signIn.routes,
      ...blockRoutes(blocks),
      ...computeRoutes(compute),
      ...sizingRoutes(sizings),
      ...documentRoutes({ folder: configuration.helpFolder, renderPage }),
    ],
  })

  /** Runs after the migrations, before the first request is served; each step can be run again. */
  const beforeServing = [
    async () => {
      if (configuration.demonstration)
        await makeDemonstrationPeople({
          database,
          people,
          hash: hasher.hash,
          file: join(configuration.dataDir, 'accounts.json'),
          now,
        })
    },
    async () => {
      const [author] = await people.ofRole(database.queries, 'editor')
      const [approver] = await people.ofRole(database.queries, 'lead')
      if (!configuration.demonstration || !author || !approver) return
      await loadSeedBlocks({
        database,
        blocks: blockRepository,
        folder: configuration.seedFolder,
        author,
        approver,
        now,
        log,
      })
    },
    () => hasher.warmUp(),
  ]
  const sweeping = setInterval(() => {
    if (database.isReady())
      Promise.all([signIn.sweep(), answersByKey.sweep()]).catch((error: unknown) => log.warn({ err: error }, 'sweep'))
  }, SWEEP_EVERY_MS).unref()

  return {
    app,
    database,
    people,
    hasher,
    reports,
    /** Resolves once the database is prepared; meanwhile requests get 503. */
    prepare: () => database.prepare(beforeServing),
    /** From now on the node says that it is not ready. */
    beginStop: () => void (stopping = true),
    async close() {
      clearInterval(sweeping)
      await Promise.all([database.close(), hasher.close()])
    },
  }
}

export type Assembly = Awaited<ReturnType<typeof assemble>>
