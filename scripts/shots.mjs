import { mkdir, rm } from 'node:fs/promises'
import { join } from 'node:path'
import {
  CHROMIUM,
  command,
  ensureSystemPackages,
  programPath,
  ROOT,
  say,
  withThrowawayProduct,
} from './provision/index.mjs'

/** Writes screenshots of every main screen at three sizes, light and dark, to shots/. */

const SIZES = [
  { name: '1280', width: 1280, height: 800 },
  { name: '1600', width: 1600, height: 1000 },
  { name: '390', width: 390, height: 844 },
]
const SCHEMES = ['light', 'dark']
const STATE = 'f_0=2.4k&Q=0.7071&K=-2&sourceOhm=50&supplyPlusVolt=5&supplyMinusVolt=-5'

/** Screens by name; `before` is what is done on the page first. */
const SCREENS = [
  { name: 'sign-in', path: '/sign-in', signedOut: true },
  { name: 'shelf', path: '/' },
  { name: 'shelf-search', path: '/?search=anti-alias' },
  { name: 'shelf-nothing', path: '/?search=lowpas' },
  { name: 'block-lp1-inv', path: '/blocks/lp1-inv' },
  { name: 'block-lp1-inv-sized', path: '/blocks/lp1-inv?f_c=2.4k&K=-2' },
  { name: 'block-lp2-mfb-sized', path: `/blocks/lp2-mfb?${STATE}` },
  { name: 'block-bp1-wide', path: '/blocks/bp1-wide' },
  { name: 'block-notes', path: '/blocks/lp2-sku', whole: true },
  {
    name: 'block-problem',
    path: '/blocks/lp2-mfb',
    before: async (page) => {
      await page.locator('.parts-table [data-part=C2]').fill('2k2')
      await page.locator('[data-target=K]').fill('2')
    },
  },
  {
    name: 'block-save',
    path: '/blocks/lp1-inv?f_c=2.4k&K=-2',
    before: async (page) => {
      await page.getByRole('button', { name: 'Save sizing' }).click()
      await page.getByRole('dialog').waitFor()
    },
  },
  {
    name: 'block-self-check',
    path: '/blocks/lp2-mfb',
    before: async (page) => {
      await page.getByRole('button', { name: 'Each line' }).click()
      await page.getByRole('dialog').waitFor()
    },
  },
  { name: 'sizings', path: '/sizings' },
  { name: 'sizing', path: '/sizings/S-1', whole: true },
  { name: 'sheet', path: '/sizings/S-1/print', whole: true },
  { name: 'help-format', path: '/help/block-format' },
  { name: 'help-keys', path: '/help/keys' },
  { name: 'settings', path: '/settings' },
  { name: 'problem', path: '/problems/unit-wrong' },
  { name: 'not-found', path: '/blocks/lp9-none' },
]

await command(async () => {
  await ensureSystemPackages(CHROMIUM)
  const { chromium } = await import('playwright-core')
  const folder = join(ROOT, 'shots')
  await rm(folder, { recursive: true, force: true })
  await mkdir(folder, { recursive: true })
  await withThrowawayProduct(async ({ address, accounts }) => {
    const browser = await chromium.launch({
      executablePath: programPath('chromium'),
      args: ['--no-sandbox', '--disable-gpu'],
    })
    const editor = accounts.find((one) => one.role === 'editor')
    let count = 0
    for (const size of SIZES)
      for (const colorScheme of SCHEMES) {
        const options = { viewport: { width: size.width, height: size.height }, colorScheme, baseURL: address }
        const context = await browser.newContext({ ...options, reducedMotion: 'reduce' })
        const stranger = await browser.newContext(options)
        await context.request.post('/api/sign-in', { data: { email: editor.email, password: editor.password } })
        await context.request.post('/api/sizings', {
          headers: { 'Idempotency-Key': 'sizing-of-the-shots' },
          data: {
            block: 'lp1-inv',
            revision: 1,
            targets: { f_c: '2.4 kHz', K: -2 },
            conditions: { supplyPlusVolt: 5, supplyMinusVolt: -5 },
            goodEnough: 0.005,
            note: 'Anti-alias stage of the vibration channel card, ahead of the converter.',
          },
        })
        for (const screen of SCREENS) {
          const page = await (screen.signedOut ? stranger : context).newPage()
          await page.goto(screen.path)
          await page.waitForLoadState('networkidle')
          await page.locator('h1, h2').first().waitFor()
          if (screen.path.startsWith('/blocks/lp') && !screen.path.includes('none'))
            await page.locator('[data-self-check=agrees]').waitFor()
          await screen.before?.(page)
          await page.screenshot({
            path: join(folder, `${screen.name}-${size.name}-${colorScheme}.png`),
            fullPage: screen.whole ?? false,
          })
          await page.close()
          count++
        }
        await Promise.all([context.close(), stranger.close()])
      }
    await browser.close()
    say(`${count} screenshots are in ${folder}.`)
  })
})
