import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { pino } from 'pino'
import { afterAll } from 'vitest'
import { ROLES, type Role } from '#shared/contracts/names'
import { assemble, type Assembly, type AssemblyOptions } from '../../src-server/app/assemble'
import { readConfiguration } from '../../src-server/app/configuration'
import { drain, listen, makeServer } from '../../src-server/app/listen'
import { emptyDatabase, type TestDatabase } from './database'

export const PASSWORD = 'a long enough password for tests'

export interface Answer {
  status: number
  headers: Headers
  text: string
  /** The parsed body; undefined when there is none. */
  body: any // eslint-disable-line @typescript-eslint/no-explicit-any
}

export interface Client {
  /** Value of the cookie header now. */
  cookie(): string
  request(method: string, path: string, body?: unknown, headers?: Record<string, string>): Promise<Answer>
  get(path: string, headers?: Record<string, string>): Promise<Answer>
  post(path: string, body?: unknown, headers?: Record<string, string>): Promise<Answer>
}

/** A client with a cookie jar, as a script has it: JSON in, JSON out. A string body goes out as it is. */
export function clientOf(base: string, cookie = ''): Client {
  let jar = cookie
  const client: Client = {
    cookie: () => jar,
    async request(method, path, body, headers = {}) {
      const sends = body !== undefined
      const answer = await fetch(base + path, {
        method,
        redirect: 'manual',
        headers: {
          ...(jar && { cookie: jar }),
          ...(method !== 'GET' && method !== 'HEAD' && { 'content-type': 'application/json' }),
          ...headers,
        },
        ...(sends && { body: typeof body === 'string' ? body : JSON.stringify(body) }),
      })
      for (const set of answer.headers.getSetCookie()) jar = set.split(';')[0]!
      const text = await answer.text()
      const isJson = /json/.test(answer.headers.get('content-type') ?? '')
      return {
        status: answer.status,
        headers: answer.headers,
        text,
        body: isJson && text ? JSON.parse(text) : undefined,
      }
    },
    get: (path, headers) => client.request('GET', path, undefined, headers),
    post: (path, body, headers) => client.request('POST', path, body, headers),
  }
  return client
}

export interface TestServer {
  base: string
  assembly: Assembly
  database: TestDatabase
  /** A client that is not signed in. */
  stranger(): Client
  /** A client signed in as the person of this role. */
  signedIn(role: Role): Promise<Client>
  emailOf(role: Role): string
  close(): Promise<void>
}

export interface TestServerSettings {
  environment?: Record<string, string>
  options?: Partial<AssemblyOptions>
  /** An existing database: for a second node on it. */
  database?: TestDatabase
  /** Whether to wait until it is ready and has its people; not while the database is away. */
  prepared?: boolean
}

const servers: TestServer[] = []

/**
 * The assembled application on a free port with a database of its own and one person a role (reader@poleshelf.example
 * and so on, all with PASSWORD). Every answer is held against its contract. Closed after the file's tests.
 */
export async function testServer(settings: TestServerSettings = {}): Promise<TestServer> {
  const database = settings.database ?? (await emptyDatabase())
  const dataDir = mkdtempSync(join(tmpdir(), 'poleshelf-data-'))
  const reading = readConfiguration({
    DATABASE_URL: database.url,
    DATA_DIR: dataDir,
    PORT: '0',
    LOG_LEVEL: 'silent',
    SESSION_SECRET: 's'.repeat(40),
    PEPPER: 'p'.repeat(40),
    DATABASE_POOL: process.env['TEST_DATABASE_POOL'] ?? '4',
    ...settings.environment,
  })
  if (!reading.ok) throw new Error(reading.problems.map((one) => one.detail).join(' '))
  const server = makeServer()
  const base = await listen(server, '127.0.0.1', 0)
  const assembly = await assemble({
    configuration: { ...reading.value, migrations: resolve('drizzle') },
    baseUrl: reading.value.baseUrl ?? base,
    log: pino({ level: process.env['TEST_LOG'] ?? 'silent' }),
    bcryptCost: 4,
    checkAnswers: true,
    ...settings.options,
  })
  server.on('request', assembly.app)
  const preparing = assembly.prepare()
  if (settings.prepared ?? true) {
    await preparing
    await makePeople(assembly)
  }
  const emailOf = (role: Role) => `${role}@poleshelf.example`
  const one: TestServer = {
    base,
    assembly,
    database,
    emailOf,
    stranger: () => clientOf(base),
    async signedIn(role) {
      const client = clientOf(base)
      const answer = await client.post('/api/sign-in', { email: emailOf(role), password: PASSWORD })
      if (answer.status !== 200) throw new Error(`Sign-in of the ${role} answered ${answer.status}: ${answer.text}`)
      return client
    },
    async close() {
      assembly.beginStop()
      server.closeAllConnections()
      await drain(server)
      await assembly.close()
      rmSync(dataDir, { recursive: true, force: true })
    },
  }
  servers.push(one)
  return one
}

async function makePeople({ people, database, hasher }: Assembly): Promise<void> {
  for (const role of ROLES) {
    const email = `${role}@poleshelf.example`
    if (await people.byEmail(database.queries, email)) continue
    const passwordHash = await hasher.hash(PASSWORD)
    await people.insert(database.queries, { email, name: `Test ${role}`, role, passwordHash, createdAt: new Date() })
  }
}

afterAll(async () => {
  await Promise.all(servers.splice(0).map((one) => one.close()))
})
