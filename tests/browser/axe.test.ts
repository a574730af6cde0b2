import { AxeBuilder } from '@axe-core/playwright'
import type { Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import {
  BROWSER_HOOK_MS,
  BROWSER_TEST_MS,
  benchReady,
  partField,
  served,
  targetField,
  visitor,
  type Served,
  type Visitor,
} from '../support/browser'
import { clientOf } from '../support/server'

const TAGS = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice']
const BLOCKS = ['lp1-inv', 'hp1-inv', 'bp1-wide', 'lp1-ni', 'lp2-sku', 'lp2-mfb']

let product: Served
let visit: Visitor
let stranger: Visitor
/** A sizing with a note, outside a limit with its reason. */
let number = ''

beforeAll(async () => {
  product = await served()
  visit = await visitor(product.base, { as: product.account('lead') })
  stranger = await visitor(product.base)
  const client = clientOf(product.base)
  const { email, password } = product.account('reader')
  await client.post('/api/sign-in', { email, password })
  const saved = await client.post(
    '/api/sizings',
    {
      block: 'lp1-inv',
      revision: 1,
      values: { Ri: '500', Rf: '47k' },
      targets: { f_c: '2.4k', K: -90 },
      conditions: { sourceOhm: 50 },
      note: 'For the level meter.',
      reason: 'The source drives 500 Ω.',
    },
    { 'Idempotency-Key': 'axe-sizing' },
  )
  expect(saved.status, saved.text).toBe(201)
  number = (saved.body as { number: string }).number
}, BROWSER_HOOK_MS)

afterAll(async () => {
  await visit?.context.close()
  await stranger?.context.close()
})

const bench = (address: string) => async (page: Page) => {
  await page.goto(address)
  await benchReady(page)
}
const heading = (address: string, name?: RegExp) => async (page: Page) => {
  await page.goto(address)
  await page.getByRole('heading', { level: 1, ...(name && { name }) }).waitFor()
  await page.locator('.load-mark').waitFor({ state: 'detached' })
}
const withDialog = (address: string, button: RegExp) => async (page: Page) => {
  await bench(address)(page)
  await page.getByRole('button', { name: button }).first().click()
  await page.getByRole('dialog').waitFor()
}

type Screen = [name: string, open: (page: Page) => Promise<void>]

const SIGNED_OUT: Screen[] = [
  ['sign-in', heading('/sign-in')],
  [
    'sign-in refused',
    async (page) => {
      await page.goto('/sign-in?next=%2Fsizings')
      await page.getByLabel('E-mail').fill('nobody@poleshelf.example')
      await page.getByLabel('Password').fill('not the password')
      await page.getByRole('button', { name: 'Sign in' }).click()
      await page.locator('.field-problem').filter({ hasText: /\S/ }).waitFor()
    },
  ],
]

const SCREENS: Screen[] = [
  ['shelf', heading('/', /block/)],
  ['shelf, searched', heading('/?search=anti-alias', /anti-alias/)],
  ['shelf, narrowed', heading('/?function=low-pass&order=2')],
  ['shelf, nothing found', heading('/?search=zzzzqq')],
  ...BLOCKS.map((code): Screen => [`block ${code}`, bench(`/blocks/${code}`)]),
  [
    'block with targets, conditions, a limit not kept, fields that cannot be read',
    async (page) => {
      await bench('/blocks/lp1-inv/revisions/1?Ri=500&f_c=2.4k&K=-90&sourceOhm=50&Rx=1')(page)
      await partField(page, 'Rf').fill('4.7 nF')
      await targetField(page, 'f_c').fill('fast')
      await page.getByLabel('Load resistance').fill('heavy')
    },
  ],
  [
    'block, response as a table',
    async (page) => {
      await bench('/blocks/lp2-mfb')(page)
      await page.getByRole('button', { name: 'As a table' }).click()
      await page.getByRole('region', { name: 'Response as a table' }).waitFor()
    },
  ],
  ['block, saving', withDialog('/blocks/lp1-inv?Ri=500&K=-90', /^Save sizing/)],
  ['block, self-check', withDialog('/blocks/lp2-mfb', /^Each line/)],
  [
    'block, runners-up',
    async (page) => {
      await bench('/blocks/lp2-mfb?f_0=2.4k')(page)
      await page.locator('.bench-sentences p').first().getByRole('button').click()
    },
  ],
  [
    'block, keys',
    async (page) => {
      await bench('/blocks/lp1-inv')(page)
      await page.keyboard.press('?')
      await page.getByRole('dialog', { name: 'Keys' }).waitFor()
    },
  ],
  [
    'block, person’s menu',
    async (page) => {
      await bench('/blocks/lp1-inv')(page)
      await page.locator('.frame-person').click()
      await page.getByRole('dialog', { name: 'Yours' }).waitFor()
    },
  ],
  ['sizings', heading('/sizings')],
  ['sizing', async (page) => heading(`/sizings/${number}`)(page)],
  ['sizing’s sheet', async (page) => heading(`/sizings/${number}/print`)(page)],
  ['help on the block format', heading('/help/block-format')],
  ['help on computing', heading('/help/computing')],
  ['keys', heading('/help/keys')],
  ['settings', heading('/settings')],
  ['problem', heading('/problems/limit-without-reason')],
  ['nothing here', heading('/nothing/here')],
  ['no such block', heading('/blocks/lp9-none')],
  ['no such sizing', heading('/sizings/S-999999')],
]

/** What the theme can change; the other rules look at what both have in common. */
const COLOUR_RULES = ['color-contrast', 'link-in-text-block']

/** The rules that a screen breaks, with the elements that do. */
async function violations(page: Page, rules: 'all' | 'colours'): Promise<string[]> {
  const axe = new AxeBuilder({ page }).options({
    resultTypes: ['violations'],
    ...(rules === 'all'
      ? { runOnly: { type: 'tag', values: TAGS }, rules: { 'target-size': { enabled: true } } }
      : { runOnly: { type: 'rule', values: COLOUR_RULES } }),
  })
  const { violations } = await axe.analyze()
  return violations.flatMap(({ id, nodes }) =>
    nodes.map((node) => `${id}: ${node.target.join(' ')} ${(node.any[0] ?? node.all[0] ?? node.none[0])?.message}`),
  )
}

/** In both themes; each is told with its theme. */
async function inBothThemes(page: Page): Promise<string[]> {
  const found: string[] = []
  for (const colorScheme of ['light', 'dark'] as const) {
    await page.emulateMedia({ colorScheme, reducedMotion: 'reduce' })
    await page.evaluate(() => document.fonts.ready.then(() => undefined))
    const rules = colorScheme === 'light' ? 'all' : 'colours'
    found.push(...(await violations(page, rules)).map((one) => `${colorScheme}: ${one}`))
  }
  return found
}

/** Elements that make the window scroll sideways (WCAG 1.4.10). */
const widerThanTheWindow = (page: Page): Promise<string[]> =>
  page.evaluate(() => {
    if (document.documentElement.scrollWidth <= innerWidth) return []
    const isCut = (one: Element) => one.closest('.katex-mathml, .unseen, .scrolls') !== null
    const wide = [...document.querySelectorAll('body *')].filter(
      (one) => one.getBoundingClientRect().right > innerWidth && !isCut(one),
    )
    return wide.map((one) => `${one.tagName.toLowerCase()}.${one.getAttribute('class') ?? ''}`)
  })

describe('axe finds no violation, light or dark', () => {
  test.each(SIGNED_OUT)(
    '%s',
    async (_, open) => {
      await open(stranger.page)
      expect(await inBothThemes(stranger.page)).toEqual([])
    },
    BROWSER_TEST_MS,
  )

  test.each(SCREENS)(
    '%s',
    async (_, open) => {
      await visit.page.emulateMedia({ colorScheme: 'light', reducedMotion: 'reduce' })
      await open(visit.page)
      expect(await inBothThemes(visit.page)).toEqual([])
    },
    BROWSER_TEST_MS,
  )

  test.each([
    ['shelf', heading('/', /block/)],
    ['block', bench('/blocks/lp2-mfb')],
    [
      'menu',
      async (page: Page) => {
        await heading('/', /block/)(page)
        await page.getByRole('button', { name: 'Menu' }).click()
      },
    ],
  ] satisfies Screen[])(
    'on a narrow screen: %s',
    async (_, open) => {
      await visit.page.setViewportSize({ width: 390, height: 844 })
      await open(visit.page)
      expect(await inBothThemes(visit.page)).toEqual([])
      expect(await widerThanTheWindow(visit.page)).toEqual([])
      await visit.page.setViewportSize({ width: 1280, height: 800 })
    },
    BROWSER_TEST_MS,
  )
})
