import { execFileSync } from 'node:child_process'
import { keyToPaint, percentile } from '../bench/key-to-paint.mjs'
import {
  CHROMIUM,
  command,
  ensurePackages,
  ensureSystemPackages,
  programPath,
  ROOT,
  say,
  withThrowawayProduct,
} from './provision/index.mjs'

/** Prints what the product takes, beside a baseline measured in the same run. */

const FRAME_MS = 1000 / 60
const KEYS = Array.from({ length: 40 }, (_, k) => (k % 4 < 2 ? 'ArrowUp' : 'ArrowDown'))
/** A value typed letter by letter and taken away again: 1, 11, 11k, 11k5. */
const LETTERS = ['1', '1', 'k', '5', 'Backspace', 'Backspace', 'Backspace', 'Backspace']
const TYPED = Array.from({ length: 48 }, (_, k) => LETTERS[k % LETTERS.length])
const BLOCKS = [
  { code: 'lp1-inv', part: 'Rf' },
  { code: 'lp2-mfb', part: 'R2' },
]

const engine = (file) =>
  JSON.parse(execFileSync(process.execPath, ['--import', 'tsx', `bench/${file}`], { cwd: ROOT, encoding: 'utf8' }))

const row = (name, times) =>
  say(
    `${name.padEnd(58)} ${String(times.length).padStart(4)} keys   median ${percentile(times, 0.5).toFixed(1).padStart(6)} ms   95 % ${percentile(times, 0.95).toFixed(1).padStart(6)} ms`,
  )

await command(async () => {
  await ensurePackages(ROOT)
  await ensureSystemPackages(CHROMIUM)
  const { chromium } = await import('playwright-core')
  const formula = engine('formula-speed.ts')
  const response = engine('response-speed.ts')
  await withThrowawayProduct(async ({ address, accounts }) => {
    // Without the wait for the display's next refresh: what is measured is the work, not the wait.
    const browser = await chromium.launch({
      executablePath: programPath('chromium'),
      args: ['--no-sandbox', '--disable-gpu', '--disable-gpu-vsync', '--disable-frame-rate-limit'],
    })
    const context = await browser.newContext({ viewport: { width: 1280, height: 800 }, baseURL: address })
    const reader = accounts.find((one) => one.role === 'reader')
    await context.request.post('/api/sign-in', { data: { email: reader.email, password: reader.password } })
    say('')
    say('From keydown to the end of script, style, layout and paint of its frame')
    const blank = await context.newPage()
    await blank.setContent('<label>Empty field <input id="field"></label>')
    const empty = await keyToPaint(blank, { focus: () => blank.locator('#field').focus(), keys: TYPED })
    row('empty field on a page of its own', empty)
    for (const { code, part } of BLOCKS) {
      const page = await context.newPage()
      await page.goto(`/blocks/${code}`)
      await page.locator('[data-self-check=agrees]').waitFor()
      const field = page.locator(`.parts-table [data-part=${part}]`)
      for (const [what, keys] of [
        ['arrow keys', KEYS],
        ['typing', TYPED],
      ]) {
        const times = await keyToPaint(page, { focus: () => field.focus(), keys })
        row(`${part} of ${code}, ${what}`, times)
        say(
          `  ${percentile(times, 0.95) <= FRAME_MS ? 'within' : 'beyond'} a frame of ${FRAME_MS.toFixed(1)} ms at the 95th percentile; ${(percentile(times, 0.5) / percentile(empty, 0.5)).toFixed(1)} times the empty field at the median`,
        )
      }
      await page.close()
    }
    await browser.close()
  })
  say('')
  say('Engine, ratios in one run')
  say(
    `${formula.name}: ${formula.median.toFixed(1)} times as fast (${formula.least.toFixed(1)} … ${formula.most.toFixed(1)})`,
  )
  say(
    `${response.name}: ${response.median.toFixed(0)} times its work, ${((100 * response.milliseconds) / FRAME_MS).toFixed(0)} % of a frame`,
  )
})
