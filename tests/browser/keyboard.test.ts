import type { Page } from 'playwright-core'
import { beforeAll, describe, expect, test } from 'vitest'
import {
  BROWSER_HOOK_MS,
  BROWSER_TEST_MS,
  SHOWS_WITHIN_MS,
  benchReady,
  noTrouble,
  partField,
  result,
  served,
  textOf,
  valueIn,
  visitor,
  type Served,
  type Visitor,
} from '../support/browser'

let product: Served
beforeAll(async () => {
  product = await served()
}, BROWSER_HOOK_MS)

const soon = { timeout: SHOWS_WITHIN_MS }
const TABS_MAX = 60

/** A person without a pointer: goes from stop to stop, and sees at each where the focus is. */
async function keyboardPerson({ page, context }: Visitor) {
  const canvas = await context.newPage()
  await page.bringToFront()
  const seen = new Set<string>()
  const unseen: string[] = []
  let tabs = 0

  /** Name of what has the focus. */
  const here = () =>
    page.evaluate(() => {
      const at = document.activeElement
      if (!at || at === document.body) return 'nothing'
      const name = at.getAttribute('aria-label') ?? at.textContent?.trim().slice(0, 60) ?? ''
      return `${at.tagName.toLowerCase()} “${name || (at.getAttribute('name') ?? '')}”`
    })

  /** WCAG 2.4.7 and 2.4.11: a picture with the focus differs from one without by a line's worth, and nothing covers it. */
  async function look(): Promise<void> {
    const stop = `${new URL(page.url()).pathname} ${await here()}`
    if (seen.has(stop)) return
    seen.add(stop)
    const box = await page.evaluate(() => {
      const { left, top, width, height } = document.activeElement!.getBoundingClientRect()
      const points = [0.1, 0.5, 0.9].flatMap((x) => [0.2, 0.5, 0.8].map((y) => [left + x * width, top + y * height]))
      const isHit = points.some(([x, y]) => {
        const hit = document.elementFromPoint(x!, y!)
        const at = document.activeElement!
        return hit !== null && (at.contains(hit) || hit.contains(at))
      })
      return { left, top, width, height, isHit }
    })
    if (!box.isHit) unseen.push(`${stop} is covered`)
    const clip = {
      x: Math.max(0, box.left - 6),
      y: Math.max(0, box.top - 6),
      width: Math.min(1280, box.width + 12),
      height: Math.min(800, box.height + 12),
    }
    const taken = async () => (await page.screenshot({ clip, caret: 'initial' })).toString('base64')
    const withFocus = await taken()
    // The ring alone is taken away; the field keeps the focus and what is typed.
    await page.evaluate(() => {
      const mark = document.createElement('button')
      mark.id = 'elsewhere'
      mark.style.cssText = 'position:fixed;left:-99px;top:0'
      document.body.append(mark)
      ;(window as unknown as { was: Element }).was = document.activeElement!
      mark.focus({ preventScroll: true })
    })
    const without = await taken()
    await page.evaluate(() => {
      ;(window as unknown as { was: HTMLElement }).was.focus({ preventScroll: true })
      document.getElementById('elsewhere')!.remove()
    })
    const changed = await canvas.evaluate(pixelsBetween, [withFocus, without] as [string, string])
    if (changed < 2 * Math.min(box.width, 40)) unseen.push(`${stop}: ${changed} pixels change`)
  }

  return {
    unseen,
    stops: () => seen.size,
    tabs: () => tabs,
    here,
    /** Presses Tab until a selector has the focus. @throws when it is not among the next stops */
    async tabTo(selector: string): Promise<void> {
      const passed: string[] = []
      for (let k = 0; k < TABS_MAX; k += 1) {
        await page.keyboard.press('Tab')
        tabs += 1
        await look()
        if (await page.evaluate((wanted) => document.activeElement?.matches(wanted), selector)) return
        passed.push(await here())
      }
      throw new Error(`${selector} was not reached: ${passed.join(', ')}`)
    },
  }
}

/** Pixels that differ visibly between two pictures. */
async function pixelsBetween(pictures: [string, string]): Promise<number> {
  const [a, b] = await Promise.all(
    pictures.map(async (base64) => {
      const image = new Image()
      image.src = `data:image/png;base64,${base64}`
      await image.decode()
      const canvas = new OffscreenCanvas(image.width, image.height)
      const drawing = canvas.getContext('2d')!
      drawing.drawImage(image, 0, 0)
      return drawing.getImageData(0, 0, image.width, image.height).data
    }),
  )
  let changed = 0
  for (let k = 0; k < a!.length; k += 4) if ([0, 1, 2].some((c) => Math.abs(a![k + c]! - b![k + c]!) > 24)) changed += 1
  return changed
}

const focused = (page: Page, selector: string) =>
  expect.poll(() => page.evaluate((wanted) => document.activeElement?.matches(wanted), selector), soon).toBe(true)

describe('without a pointer', () => {
  test(
    'one signs in, finds a block, sets targets, saves and gets back, seeing the focus at each stop',
    async () => {
      const visit = await visitor(product.base)
      const { page, trouble } = visit
      const { email, password } = product.account('reader')
      await page.goto('/')
      await page.waitForURL(/\/sign-in/)
      const person = await keyboardPerson(visit)

      await focused(page, 'input[name="email"]')
      await page.keyboard.type(email)
      await person.tabTo('input[name="password"]')
      await page.keyboard.type(password)
      await page.keyboard.press('Enter')
      await page.getByRole('table', { name: 'Blocks' }).waitFor()

      await page.keyboard.press('/')
      await focused(page, 'input[name="search"]')
      await page.keyboard.type('inverting low')
      await expect.poll(() => new URL(page.url()).searchParams.get('search'), soon).toBe('inverting low')
      await expect.poll(() => page.locator('[data-shelf-row]').first().textContent(), soon).toMatch(/LP1-INV/)
      await page.keyboard.press('ArrowDown')
      await focused(page, '[data-shelf-row]')
      await page.keyboard.press('Enter')
      await benchReady(page)
      await focused(page, 'main h1')

      await person.tabTo('.parts-table [data-part="Rf"]')
      await page.keyboard.press('ArrowUp')
      expect(await valueIn(partField(page, 'Rf'))).toBe('45.3 kΩ')
      await page.keyboard.press('Escape')
      expect(await valueIn(partField(page, 'Rf'))).toBe('44.2 kΩ')
      await person.tabTo('[aria-label="Series of Rf"]')
      await page.keyboard.type('E24')
      await expect.poll(() => page.getByLabel('Series of Rf').inputValue(), soon).toBe('E24')
      await page.keyboard.press('Control+Z')
      await expect.poll(() => page.getByLabel('Series of Rf').inputValue(), soon).toBe('E96')

      await person.tabTo('[data-target="f_c"]')
      await page.keyboard.type('2.4 kHz')
      await person.tabTo('[data-target="K"]')
      await page.keyboard.type('-2')
      await expect.poll(() => textOf(result(page, 'f_c')), soon).toMatch(/^2\.40\d? kHz$/)
      for (const [part, value] of [
        ['Ri', '22.1 kΩ'],
        ['Rf', '44.2 kΩ'],
        ['Cf', '1.5 nF'],
      ] as const)
        expect(await valueIn(partField(page, part))).toBe(value)

      await person.tabTo('.bench-acts button.filled')
      await page.keyboard.press('Enter')
      await focused(page, '[role="dialog"] textarea')
      await page.keyboard.type('By keyboard.')
      await person.tabTo('[role="dialog"] button[type="submit"]')
      await page.keyboard.press('Enter')
      await page.waitForURL(/\/sizings\/S-\d+$/)
      await focused(page, 'main h1')
      expect(await textOf(page.locator('main h1').locator('visible=true'))).toMatch(/S-\d+/)
      const number = /S-\d+$/.exec(page.url())![0]

      // The rest of the sizing's stops, and by the header back to the shelf.
      await page.keyboard.press('Control+K')
      await focused(page, 'input[name="search"]')
      await page.keyboard.type('lp2')
      await page.keyboard.press('Enter')
      await page.waitForURL(/\?search=lp2/)
      await page.goto(`/sizings/${number}`)
      await page.locator('main h1').locator('visible=true').waitFor()
      await person.tabTo('a[href="/sizings"]')
      await page.keyboard.press('Enter')
      await page.getByRole('link', { name: number }).waitFor()

      console.log(`By keyboard alone: ${person.tabs()} Tab presses, ${person.stops()} stops looked at.`)
      expect(person.unseen).toEqual([])
      expect(person.tabs()).toBeLessThan(80)
      expect(trouble).toEqual(noTrouble)
      await visit.context.close()
    },
    BROWSER_TEST_MS,
  )

  test(
    'the first stop of a page leads past the header to its content',
    async () => {
      const { page, context } = await visitor(product.base, { as: product.account('reader') })
      await page.goto('/')
      await page.getByRole('table', { name: 'Blocks' }).waitFor()
      await page.evaluate(() => (document.activeElement as HTMLElement).blur())
      await page.keyboard.press('Tab')
      expect(await page.evaluate(() => document.activeElement?.textContent?.trim())).toBe('Skip to the content')
      await page.keyboard.press('Enter')
      await focused(page, 'main')
      await context.close()
    },
    BROWSER_TEST_MS,
  )
})

describe('single keys', () => {
  test(
    '/ and ? act on the page and are letters in a field; Ctrl K acts everywhere',
    async () => {
      const { page, context } = await visitor(product.base, { as: product.account('reader') })
      await page.goto('/blocks/lp1-inv')
      await benchReady(page)
      const field = partField(page, 'Rf')
      await field.focus()
      await page.keyboard.type('/?')
      expect(await field.inputValue()).toBe('/?')
      expect(await page.getByRole('dialog').count()).toBe(0)
      await page.keyboard.press('Escape')
      await page.keyboard.press('Control+K')
      await focused(page, 'input[name="search"]')

      await page.getByRole('button', { name: 'Save sizing' }).focus()
      await page.keyboard.press('?')
      const keys = page.getByRole('dialog', { name: 'Keys' })
      await keys.waitFor()
      const isInside = () => keys.evaluate((dialog) => dialog.contains(document.activeElement))
      await expect.poll(isInside, soon).toBe(true)
      for (let k = 0; k < 8; k += 1) {
        await page.keyboard.press('Tab')
        await expect.poll(isInside, soon).toBe(true)
      }
      await page.keyboard.press('Escape')
      await keys.waitFor({ state: 'hidden' })
      await focused(page, '.bench-acts button.filled')
      await page.keyboard.press('/')
      await focused(page, 'input[name="search"]')
      await context.close()
    },
    BROWSER_TEST_MS,
  )

  test(
    'switched off they do nothing, and Ctrl K still does',
    async () => {
      const { page, context } = await visitor(product.base, { as: product.account('reader') })
      await page.goto('/settings')
      const choice = page.getByRole('checkbox', { name: /single|keys/i })
      await choice.waitFor()
      expect(await choice.isChecked()).toBe(true)
      await choice.focus()
      await page.keyboard.press('Space')
      await page.goto('/blocks/lp1-inv')
      await benchReady(page)
      await page.getByRole('button', { name: 'Save sizing' }).focus()
      await page.keyboard.press('?')
      await page.keyboard.press('/')
      expect(await page.getByRole('dialog').count()).toBe(0)
      await focused(page, '.bench-acts button.filled')
      await page.keyboard.press('Control+K')
      await focused(page, 'input[name="search"]')
      await context.close()
    },
    BROWSER_TEST_MS,
  )
})
