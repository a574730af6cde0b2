import type { Page } from 'playwright-core'
import { beforeAll, describe, expect, test } from 'vitest'
import { readBlock } from '#shared/page-source/read-block'
import {
  hostileAddresses,
  HOSTILE_PARAGRAPHS,
  HOSTILE_TARGETS,
  HOSTILE_WORDS,
  hostilePage,
} from '../security/hostile-inputs'
import {
  BROWSER_HOOK_MS,
  BROWSER_TEST_MS,
  SHOWS_WITHIN_MS,
  benchReady,
  builtClient,
  noTrouble,
  visitor,
  type Visitor,
} from '../support/browser'
import { until } from '../support/process'
import { PASSWORD, clientOf, testServer, type TestServer } from '../support/server'
import { putRevision } from '../support/shelf'

const SUMMARY_WORDS = 3
const blockOf = (k: number) => `hostile-${k}`

let server: TestServer
let visit: Visitor
const sizings: string[] = []
/** Every input has a number that is shown with it: those seen on a page reached one. */
const inputs: string[] = []
const refused: string[] = []
const reached = new Set<number>()

const numbered = (text: string): string => `${text} zq${inputs.push(text) - 1}q`

beforeAll(async () => {
  await builtClient()
  server = await testServer()
  const { people, hasher, database } = server.assembly
  const hostileName = numbered(HOSTILE_WORDS[1]!)
  const hostile = { email: 'hostile@poleshelf.example', password: PASSWORD }
  await people.insert(database.queries, {
    email: hostile.email,
    name: hostileName,
    role: 'reader',
    passwordHash: await hasher.hash(PASSWORD),
    createdAt: new Date(),
  })
  await fillShelf()
  const client = clientOf(server.base)
  expect((await client.post('/api/sign-in', hostile)).status).toBe(200)
  for (const [k, words] of HOSTILE_WORDS.entries()) {
    const saved = await client.post('/api/sizings', {
      block: blockOf(k),
      revision: 1,
      targets: { f_c: '2.4k', K: -2 },
      note: numbered(words),
      reason: numbered(words),
    })
    expect(saved.status, saved.text).toBe(201)
    sizings.push((saved.body as { number: string }).number)
  }
  visit = await visitor(server.base, { as: hostile })
}, BROWSER_HOOK_MS)

/** A block for each kind of words, with hostile words in all its places and its share of the hostile notes. */
async function fillShelf(): Promise<void> {
  const accepted = HOSTILE_PARAGRAPHS.filter((paragraph) => {
    const page = hostilePage({ code: 'hostile-0', words: () => 'x', notes: paragraph })
    const isRead = readBlock(page).ok
    if (!isRead) refused.push(paragraph)
    return isRead
  })
  for (const [k, words] of HOSTILE_WORDS.entries()) {
    const notes = accepted
      .filter((_, at) => at % HOSTILE_WORDS.length === k)
      .map((paragraph) => `${numbered('')}\n\n${paragraph}`)
    const text = hostilePage({
      code: blockOf(k),
      words: (limit) => (words.length + 8 <= limit ? numbered(words) : words.slice(0, limit)),
      notes: notes.join('\n\n'),
    })
    await putRevision(server, text, { number: 1, status: 'approved' })
    await server.database.root.query(
      'UPDATE revisions SET change_note = ?, author_name = ?, approved_by_name = ? ORDER BY id DESC LIMIT 1',
      [numbered(words), numbered(words), numbered(words)],
    )
  }
}

/** Opens a page, waits until all of it is there, and looks at what it is made of. */
async function open(page: Page, path: string): Promise<void> {
  await page.goto(path)
  await page
    .locator('h1:not([data-loading])')
    .first()
    .waitFor()
    .catch((error: unknown) => Promise.reject(new Error(`${path} has no heading`, { cause: error })))
  if ((await page.locator('.bench').count()) > 0) await benchReady(page)
  const found = await page.evaluate(() => {
    const all = [...document.querySelectorAll('*')]
    const address = (one: Element) =>
      one.getAttribute('href') ??
      one.getAttribute('src') ??
      one.getAttribute('action') ??
      one.getAttribute('xlink:href')
    return {
      html: document.documentElement.outerHTML,
      handlers: all.flatMap((one) => one.getAttributeNames().filter((name) => /^on|^srcdoc$|^formaction$/.test(name))),
      addresses: all.map(address).filter((one) => one !== null && !/^(https?:\/\/|mailto:|\/(?![/\\])|#)/.test(one)),
      elements: all
        .map((one) => one.localName)
        .filter((name) => /^(iframe|object|embed|base|frame|applet)$/.test(name)),
      scripts: [...document.scripts].map((one) => one.src).filter((src) => !src.startsWith(location.origin)),
      shadowing: [...document.querySelectorAll('.safe-html [id], .safe-html [name]')]
        .map((one) => one.id || one.getAttribute('name')!)
        .filter((id) => !id.startsWith('n-')),
      isWide: document.documentElement.scrollWidth > innerWidth,
    }
  })
  for (const [, number] of found.html.matchAll(/zq(\d+)q/g)) reached.add(Number(number))
  expect({ ...found, html: '' }, path).toEqual({
    html: '',
    handlers: [],
    addresses: [],
    elements: [],
    scripts: [],
    shadowing: [],
    isWide: false,
  })
}

function nothingHappened(): void {
  const { errors, ...others } = visit.trouble
  expect(others).toEqual({ foreign: [], dialogs: [], breaches: [] })
  expect(errors.filter((one) => !one.startsWith('Failed to load resource'))).toEqual([])
  expect(server.assembly.reports.count(), server.assembly.reports.recent().join('\n')).toBe(0)
}

describe('hostile text from the database and through the interface', () => {
  test(
    'does nothing on the block it is in',
    async () => {
      for (const k of HOSTILE_WORDS.keys()) await open(visit.page, `/blocks/${blockOf(k)}`)
      await open(visit.page, '/blocks/hostile-0/revisions/1')
      nothingHappened()
    },
    BROWSER_TEST_MS,
  )

  test(
    'does nothing on the shelf and in what a search finds',
    async () => {
      await open(visit.page, '/')
      await open(visit.page, '/?search=script')
      await open(visit.page, '/?search=alert&function=low-pass')
      nothingHappened()
    },
    BROWSER_TEST_MS,
  )

  test(
    'does nothing in the list of sizings, on a sizing and on its sheet',
    async () => {
      await open(visit.page, '/sizings')
      for (const number of sizings) await open(visit.page, `/sizings/${number}`)
      for (const number of sizings.slice(0, SUMMARY_WORDS)) await open(visit.page, `/sizings/${number}/print`)
      nothingHappened()
    },
    BROWSER_TEST_MS,
  )

  test(
    'does nothing in an address',
    async () => {
      for (const words of HOSTILE_WORDS.slice(0, SUMMARY_WORDS))
        for (const path of hostileAddresses(words)) {
          await open(visit.page, path)
          inputs.push(path)
          reached.add(inputs.length - 1)
        }
      for (const target of HOSTILE_TARGETS) {
        await visit.page.goto(`/sign-in?next=${encodeURIComponent(target)}`)
        await visit.page.waitForURL(`${server.base}/`)
        inputs.push(target)
        reached.add(inputs.length - 1)
      }
      nothingHappened()
    },
    BROWSER_TEST_MS,
  )

  test('reached the pages, or was refused before it was kept', () => {
    console.log(
      `${inputs.length} hostile inputs, ${reached.size} of them seen on a page; ${refused.length} more refused as pages.`,
    )
    expect(reached.size).toBeGreaterThanOrEqual(200)
    // Only second widget fences, and formulas and values that the block does not have.
    expect(refused.length).toBeLessThanOrEqual(12)
  })

  test(
    'would have been noticed',
    async () => {
      const { page, context, trouble } = await visitor(server.base)
      await open(page, '/sign-in')
      await page.evaluate(() => {
        document.body.insertAdjacentHTML('beforeend', '<img src="https://evil.example/x.png" onerror="alert(1)">')
        alert(2)
        ;(window as unknown as { __marker: number }).__marker = 3
      })
      await expect.poll(() => trouble.breaches.join(), { timeout: SHOWS_WITHIN_MS }).toMatch(/img-src/)
      expect(trouble.breaches.join()).toMatch(/script-src-attr/)
      expect(trouble.dialogs).toEqual(['alert 2', 'marker 3'])
      await until(async () => Promise.resolve(server.assembly.reports.count() > 0), SHOWS_WITHIN_MS)
      expect(trouble).not.toEqual(noTrouble)
      await context.close()
    },
    BROWSER_TEST_MS,
  )
})
