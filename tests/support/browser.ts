import { existsSync, mkdirSync, rmdirSync } from 'node:fs'
import { chromium, type Browser, type BrowserContext, type Locator, type Page } from 'playwright-core'
import { afterAll } from 'vitest'
import type { Role } from '#shared/contracts/names'
import type { Account } from '../../src-server/people'
import { emptyDatabase } from './database'
import { serverProcess, statusOf, until, type ServerProcess } from './process'
import { clientOf } from './server'

const READY_WITHIN_MS = 120_000
const BUILT_WITHIN_MS = 240_000

/** For hooks and tests: starting a server and a browser, and what runs beside this, take their time. */
export const BROWSER_HOOK_MS = 300_000
export const BROWSER_TEST_MS = 120_000
/** How long one waits for something to show. */
export const SHOWS_WITHIN_MS = 20_000

/** Builds the client if none is there; of several test files at once, one does. */
export async function builtClient(): Promise<void> {
  const isBuilt = () => existsSync('dist/spa/index.html')
  if (isBuilt()) return
  const mark = 'dist/.being-built-for-tests'
  mkdirSync('dist', { recursive: true })
  try {
    mkdirSync(mark)
  } catch {
    await until(() => Promise.resolve(isBuilt() && !existsSync(mark)), BUILT_WITHIN_MS)
    return
  }
  try {
    const { ensureClient } = (await import('../../scripts/provision/client-build.mjs')) as {
      ensureClient(root: string): Promise<string>
    }
    await ensureClient(process.cwd())
  } finally {
    rmdirSync(mark)
  }
}

export interface Served {
  base: string
  server: ServerProcess
  account(role: Role): Account
}

/** The product as people reach it: its own process, the built client, a database of its own, the house blocks. */
export async function served(environment: Record<string, string> = {}): Promise<Served> {
  await builtClient()
  const url = environment['DATABASE_URL'] ?? (await emptyDatabase()).url
  const server = await serverProcess({ DATABASE_URL: url, DATABASE_POOL: '4', ...environment })
  await until(async () => (await statusOf(`${server.base}/health/ready`)) === 200, READY_WITHIN_MS)
  return {
    base: server.base,
    server,
    account: (role) => server.accounts().find((one) => one.role === role)!,
  }
}

let shared: Promise<Browser> | null = null

/** One Chromium for the test file. */
export const browser = (): Promise<Browser> =>
  (shared ??= chromium.launch({
    executablePath: process.env['CHROMIUM_PATH'] ?? '/usr/bin/chromium',
    args: [
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  }))

afterAll(async () => {
  await (await shared)?.close()
  shared = null
})

/** What happened in a window that nobody should have to see. */
export interface Trouble {
  /** Errors that no code caught, and what was written to the console as an error. */
  errors: string[]
  /** Requests to other origins. */
  foreign: string[]
  /** alert, confirm, prompt, print. */
  dialogs: string[]
  /** Breaches of the content security policy. */
  breaches: string[]
}

export const noTrouble: Trouble = { errors: [], foreign: [], dialogs: [], breaches: [] }

export interface Visitor {
  context: BrowserContext
  page: Page
  trouble: Trouble
}

export interface VisitorSettings {
  /** Who is signed in from the start. */
  as?: { email: string; password: string }
  theme?: 'light' | 'dark'
}

const cookies = new Map<string, string>()

/** Cookie of a signed-in session; one for each account and server. */
async function cookieOf(base: string, { email, password }: { email: string; password: string }): Promise<string> {
  const known = cookies.get(`${base} ${email}`)
  if (known) return known
  const client = clientOf(base)
  const answer = await client.post('/api/sign-in', { email, password })
  if (answer.status !== 200) throw new Error(`Sign-in of ${email} answered ${answer.status}: ${answer.text}`)
  cookies.set(`${base} ${email}`, client.cookie())
  return client.cookie()
}

/** A fresh window with nothing stored, signed in or not. */
export async function visitor(base: string, { as, theme = 'light' }: VisitorSettings = {}): Promise<Visitor> {
  const context = await (
    await browser()
  ).newContext({
    viewport: { width: 1280, height: 800 },
    baseURL: base,
    locale: 'en-GB',
    colorScheme: theme,
    reducedMotion: 'reduce',
  })
  context.setDefaultTimeout(SHOWS_WITHIN_MS)
  if (as) {
    const [name = '', value = ''] = (await cookieOf(base, as)).split(/=(.*)/s)
    await context.addCookies([{ name, value, url: base }])
  }
  const trouble: Trouble = { errors: [], foreign: [], dialogs: [], breaches: [] }
  await context.exposeBinding('__tellTest', (_, kind: 'dialogs' | 'breaches', text: string) => {
    trouble[kind].push(text)
  })
  await context.addInitScript(`
    for (const name of ['alert', 'confirm', 'prompt', 'print'])
      window[name] = (words) => void window.__tellTest('dialogs', name + ' ' + words)
    Object.defineProperty(window, '__marker', { set: (value) => void window.__tellTest('dialogs', 'marker ' + value) })
    document.addEventListener('securitypolicyviolation', (event) =>
      window.__tellTest('breaches', event.effectiveDirective + ' ' + event.blockedURI + ' ' + event.sample))
  `)
  context.on('request', (request) => {
    const url = request.url()
    if (!url.startsWith(`${base}/`) && !/^(data|blob):/.test(url)) trouble.foreign.push(url)
  })
  context.on('page', (page) => {
    page.on('pageerror', (error) => trouble.errors.push(String(error)))
    page.on('console', (message) => {
      // Who one is, asked before sign-in, is answered 401; browsers write that down.
      const isAskedBeforeSignIn = message.location().url.endsWith('/api/me') && message.text().includes('401')
      if (message.type() === 'error' && !isAskedBeforeSignIn) trouble.errors.push(message.text())
    })
    page.on('dialog', (dialog) => {
      trouble.dialogs.push(`${dialog.type()} ${dialog.message()}`)
      void dialog.dismiss().catch(() => {})
    })
  })
  return { context, page: await context.newPage(), trouble }
}

/** Text as one reads it: any space is a space, minus signs are hyphens. */
export const plain = (text: string): string =>
  text
    .replace(/[\u2009\u202f\u00a0\u2002\s]+/g, ' ')
    .replaceAll('\u2212', '-')
    .trim()

export const textOf = async (locator: Locator): Promise<string> => plain((await locator.textContent()) ?? '')
export const valueIn = async (locator: Locator): Promise<string> => plain(await locator.inputValue())

export const partField = (page: Page, name: string): Locator => page.locator(`.parts-table [data-part="${name}"]`)
export const drawnField = (page: Page, name: string): Locator => page.locator(`.drawing [data-part="${name}"]`)
export const targetField = (page: Page, name: string): Locator => page.locator(`[data-target="${name}"]`)
export const result = (page: Page, name: string): Locator => page.locator(`[data-result="${name}"]`)
export const errorOf = (page: Page, name: string): Locator => page.locator(`[data-error="${name}"]`)

/** Waits until the bench can be typed in and its self-check belongs to the values shown. */
export async function benchReady(page: Page): Promise<void> {
  await page.locator('.bench[data-ready="true"]').waitFor()
  await page.locator('[data-self-check][data-current="true"]').waitFor()
}
