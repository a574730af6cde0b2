import { setTimeout as pause } from 'node:timers/promises'
import mysql from 'mysql2/promise'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { startProduct } from '../../scripts/provision/product.mjs'
import { throwawayFolder } from '../../scripts/provision/throwaway-folder.mjs'
import {
  BROWSER_HOOK_MS,
  BROWSER_TEST_MS,
  SHOWS_WITHIN_MS,
  benchReady,
  builtClient,
  partField,
  served,
  targetField,
  valueIn,
  visitor,
  type Served,
  type Visitor,
} from '../support/browser'
import { throwAwayServer, type ThrowAwayServer } from '../support/database'
import { statusOf, until } from '../support/process'
import { clientOf, type Client } from '../support/server'

const ROUNDS = 5
const BACK_WITHIN_MS = 60_000
const soon = { timeout: SHOWS_WITHIN_MS }

describe('kill −9 right after “saved”', () => {
  let product: Awaited<ReturnType<typeof startProduct>>
  let folder: Awaited<ReturnType<typeof throwawayFolder>>
  let client: Client
  /** Acknowledged saves: key and the answer, as it came. */
  const ledger = new Map<string, Record<string, unknown>>()
  /** Saves that were under way at a kill and got no answer. */
  const unanswered = new Set<string>()

  beforeAll(async () => {
    await builtClient()
    folder = await throwawayFolder()
    product = await startProduct({ dataDir: folder.path, port: 0, settings: { DATABASE_POOL: '6' } })
    client = clientOf(product.address)
    const { email, password } = product.accounts.find((one) => one.role === 'reader')!
    expect((await client.post('/api/sign-in', { email, password })).status).toBe(200)
  }, BROWSER_HOOK_MS)

  afterAll(async () => {
    await product?.stop()
    folder?.remove()
  }, BROWSER_HOOK_MS)

  async function save(key: string): Promise<void> {
    unanswered.add(key)
    const body = { block: 'lp1-inv', revision: 1, targets: { f_c: '2.4 kHz', K: -2 }, note: key }
    const answer = await client.post('/api/sizings', body, { 'Idempotency-Key': key })
    if (answer.status !== 201) throw new Error(`${answer.status} ${answer.text}`)
    unanswered.delete(key)
    ledger.set(key, answer.body as Record<string, unknown>)
  }

  /** As the page does it: the same save again under the same key, for as long as the answer is 503. */
  const saveAgain = (key: string) =>
    until(
      () =>
        save(key).then(
          () => true,
          (error: Error) => (error.message.startsWith('503 ') ? pause(400, false) : Promise.reject(error)),
        ),
      BACK_WITHIN_MS,
    )

  const ready = async () => (await statusOf(`${product.address}/health/ready`)) === 200

  test.each([
    ['server', () => product.serverPid()],
    ['database', () => product.databasePid()],
  ] as const)(
    `of the %s, ${ROUNDS} times: it comes back by itself`,
    async (what, pidOf) => {
      for (let round = 1; round <= ROUNDS; round += 1) {
        const pid = pidOf()!
        // The first acknowledgement pulls the trigger; the others are somewhere on their way.
        const saves = ['a', 'b', 'c'].map((one) => save(`${what}-${round}${one}`))
        const kill = Promise.any(saves).then(() => process.kill(pid, 'SIGKILL'))
        await kill
        await Promise.allSettled(saves)
        await until(async () => pidOf() !== pid && pidOf() !== null && (await ready()), BACK_WITHIN_MS)
      }
    },
    BROWSER_TEST_MS,
  )

  test(
    'nothing acknowledged is lost, nothing is there twice, nothing is half-written',
    async () => {
      const acknowledged = ledger.size
      expect(acknowledged).toBeGreaterThanOrEqual(2 * ROUNDS)
      await Promise.all([...unanswered].map(saveAgain))
      expect(ledger.size).toBe(2 * 3 * ROUNDS)
      console.log(
        `Acknowledged right before a kill: ${acknowledged}; sent again afterwards: ${ledger.size - acknowledged}.`,
      )
      const { body } = await client.get('/api/sizings?limit=200')
      const rows = (body as { rows: { number: string; note: string }[] }).rows
      expect(rows.map((row) => row.note).sort()).toEqual([...ledger.keys()].sort())
      for (const [key, saved] of ledger) {
        const kept = await client.get(`/api/sizings/${String(saved['number'])}`)
        expect(kept.status, key).toBe(200)
        expect(kept.body, key).toEqual(saved)
      }
    },
    BROWSER_TEST_MS,
  )
})

describe('while the database or the connection is away', () => {
  let database: ThrowAwayServer
  let product: Served
  let visit: Visitor
  let keys: string[]

  beforeAll(async () => {
    database = await throwAwayServer()
    const root = await mysql.createConnection(database.url)
    await root.query('CREATE DATABASE poleshelf CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci')
    root.destroy()
    product = await served({ DATABASE_URL: `${database.url}poleshelf` })
    visit = await visitor(product.base, { as: product.account('reader') })
    visit.page.on('request', (request) => {
      const key = request.headers()['idempotency-key']
      if (key && request.url().endsWith('/api/sizings')) keys.push(key)
    })
  }, BROWSER_HOOK_MS)

  afterAll(async () => {
    await visit?.context.close()
    product?.server.signal('SIGKILL')
    await database?.stop()
  }, BROWSER_HOOK_MS)

  /** A block with something typed and the dialog filled in, ready to be saved. */
  async function typed(note: string) {
    const { page } = visit
    keys = []
    await page.goto('/blocks/lp1-inv')
    await benchReady(page)
    await partField(page, 'Cf').fill('2n2')
    await targetField(page, 'K').fill('-3')
    await page.getByRole('button', { name: 'Save sizing' }).click()
    const dialog = page.getByRole('dialog', { name: 'Save this sizing' })
    await dialog.getByLabel(/^Note/).fill(note)
    return { page, dialog, save: dialog.getByRole('button', { name: /^Sav/ }), words: page.locator('.frame-status') }
  }

  async function savedOnce(note: string) {
    const { rows } = (await (await visit.context.request.get('/api/sizings?limit=200')).json()) as {
      rows: { note: string }[]
    }
    expect(rows.filter((row) => row.note === note)).toHaveLength(1)
    expect(new Set(keys).size).toBe(1)
  }

  test(
    'a save while the database is killed says so, keeps what was typed, and goes through once it is back',
    async () => {
      const note = 'Saved across a killed database.'
      const { page, dialog, save, words } = await typed(note)
      database.signal('SIGKILL')
      await until(async () => (await statusOf(`${product.base}/health/ready`)) === 503, BACK_WITHIN_MS)
      await save.click()
      await expect.poll(() => words.textContent(), soon).toMatch(/database does not answer.*typed is kept/i)
      // It tries again by itself for a while, then says that nothing is lost.
      await dialog.getByRole('alert').filter({ hasText: 'Nothing typed is lost.' }).waitFor({ timeout: BACK_WITHIN_MS })
      expect(await dialog.getByLabel(/^Note/).inputValue()).toBe(note)
      expect(await valueIn(partField(page, 'Cf'))).toMatch(/^2n2$|^2\.2 nF$/)
      expect(await valueIn(targetField(page, 'K'))).toBe('-3')

      await database.start()
      await until(async () => (await statusOf(`${product.base}/health/ready`)) === 200, BACK_WITHIN_MS)
      await expect.poll(() => words.textContent(), soon).toBe('')
      await save.click()
      await page.waitForURL(/\/sizings\/S-\d+$/)
      await savedOnce(note)
    },
    BROWSER_TEST_MS,
  )

  test(
    'a save that the database outlives goes through without another act',
    async () => {
      const note = 'Saved by itself.'
      const { page, save } = await typed(note)
      database.signal('SIGKILL')
      await save.click()
      await pause(0)
      await database.start()
      await page.waitForURL(/\/sizings\/S-\d+$/, { timeout: BACK_WITHIN_MS })
      await savedOnce(note)
    },
    BROWSER_TEST_MS,
  )

  test(
    'a save whose answer was lost makes one sizing',
    async () => {
      const note = 'The answer was lost.'
      const { page, save } = await typed(note)
      let cut = 0
      await page.route('**/api/sizings', async (route) => {
        if (route.request().method() !== 'POST' || cut > 0) return route.continue()
        cut += 1
        await route.fetch()
        await route.abort('connectionreset')
      })
      await save.click()
      await page.waitForURL(/\/sizings\/S-\d+$/, { timeout: BACK_WITHIN_MS })
      await page.unroute('**/api/sizings')
      expect(cut).toBe(1)
      expect(keys.length).toBeGreaterThanOrEqual(2)
      await savedOnce(note)
    },
    BROWSER_TEST_MS,
  )

  test(
    'without a connection the page says so, computes on, and saves when it is back',
    async () => {
      const note = 'Typed without a connection.'
      const { page, dialog, save, words } = await typed(note)
      await visit.context.setOffline(true)
      await expect.poll(() => words.textContent(), soon).toMatch(/connection to the server is lost/i)
      await dialog.getByRole('button', { name: 'Not yet' }).click()
      await targetField(page, 'K').fill('-4')
      await expect.poll(() => page.locator('[data-result="K"]').textContent(), soon).toMatch(/[−-][34]\.\d/)
      await page.getByRole('button', { name: 'Save sizing' }).click()
      expect(await dialog.getByLabel(/^Note/).inputValue()).toBe(note)
      await visit.context.setOffline(false)
      await expect.poll(() => words.textContent(), soon).toBe('')
      await save.click()
      await page.waitForURL(/\/sizings\/S-\d+$/)
      await savedOnce(note)
    },
    BROWSER_TEST_MS,
  )

  test(
    'a session that ended asks for the password over the page, and the save goes on',
    async () => {
      const note = 'Signed in again.'
      const { page, save } = await typed(note)
      await visit.context.clearCookies()
      await save.click()
      const again = page.getByRole('dialog', { name: 'Sign in again' })
      await again.getByLabel('Password').fill(product.account('reader').password)
      await again.getByRole('button', { name: 'Sign in', exact: true }).click()
      await page.waitForURL(/\/sizings\/S-\d+$/)
      await savedOnce(note)
    },
    BROWSER_TEST_MS,
  )
})
