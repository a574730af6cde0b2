/** Time from a key to the end of its frame, from a Chromium trace. */

const CATEGORIES = ['devtools.timeline', 'disabled-by-default-devtools.timeline', 'blink.user_timing']
const WARM_UP = 10
/** What a frame does on the main thread after the script. */
const FRAME_WORK = new Set(['UpdateLayoutTree', 'Layout', 'PrePaint', 'Paint', 'Layerize', 'Commit'])

/**
 * Presses keys in a field and reads, for each, the time from the start of its keydown to the end of script, style,
 * layout and paint of the frame that shows it.
 * @param {import('playwright-core').Page} page
 * @param {{ focus: () => Promise<void>, keys: string[] }} options
 * @returns {Promise<number[]>} milliseconds, one a key
 */
export async function keyToPaint(page, { focus, keys }) {
  await focus()
  // The first keys on a page are compiled as they run; they are typed and taken back before the measurement.
  for (let k = 0; k < WARM_UP; k++) await page.keyboard.press(k % 2 ? 'ArrowDown' : 'ArrowUp', { delay: 40 })
  const session = await page.context().newCDPSession(page)
  const events = []
  session.on('Tracing.dataCollected', ({ value }) => events.push(...value))
  await session.send('Tracing.start', {
    transferMode: 'ReportEvents',
    traceConfig: { includedCategories: CATEGORIES, recordMode: 'recordAsMuchAsPossible' },
  })
  for (const key of keys) {
    await page.keyboard.press(key)
    // Keys come one by one, as a person types; each has its own frame.
    await page.evaluate(() => new Promise((done) => requestAnimationFrame(() => setTimeout(done, 60))))
  }
  const complete = new Promise((done) => session.once('Tracing.tracingComplete', done))
  await session.send('Tracing.end')
  await complete
  await session.detach()
  return timesOf(events)
}

/** @param {any[]} events */
function timesOf(events) {
  const keydowns = events
    .filter((event) => event.name === 'EventDispatch' && event.args?.data?.type === 'keydown')
    .sort((a, b) => a.ts - b.ts)
  const work = events.filter((event) => event.ph === 'X' && FRAME_WORK.has(event.name)).sort((a, b) => a.ts - b.ts)
  return keydowns.flatMap((keydown, k) => {
    const before = keydowns[k + 1]?.ts ?? Infinity
    const mine = work.filter((event) => event.tid === keydown.tid && event.ts >= keydown.ts && event.ts < before)
    // The first frame after the key ends with its commit; later frames are of other things.
    const commit = mine.find((event) => event.name === 'Commit')
    return commit ? [(commit.ts + (commit.dur ?? 0) - keydown.ts) / 1000] : []
  })
}

/** @param {number[]} times @param {number} share */
export function percentile(times, share) {
  const sorted = [...times].sort((a, b) => a - b)
  return sorted[Math.min(sorted.length - 1, Math.ceil(share * sorted.length) - 1)] ?? NaN
}
