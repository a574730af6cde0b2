import { writeFileSync, mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { expect, it } from 'vitest'
import { freePort } from '../../support/database'
import { serverProcess } from '../../support/process'

const DATABASE_URL = 'mysql://nobody@127.0.0.1:1/nothing'

it('ends with a sentence when a setting is wrong', async () => {
  await expect(serverProcess({ DATABASE_URL, PORT: 'many' })).rejects.toThrow(/ended with 2: PORT takes a number/)
}, 30_000)

it('ends with a sentence when the port is taken', async () => {
  const PORT = String(await freePort())
  await serverProcess({ DATABASE_URL, PORT })
  await expect(serverProcess({ DATABASE_URL, PORT })).rejects.toThrow(/ended with 3: .*is taken; PORT chooses another/)
}, 30_000)

it('ends with a sentence when the data folder cannot be made', async () => {
  const file = join(mkdtempSync(join(tmpdir(), 'poleshelf-file-')), 'file')
  writeFileSync(file, '')
  await expect(serverProcess({ DATABASE_URL, DATA_DIR: join(file, 'data') })).rejects.toThrow(
    /ended with 4: The data folder .* cannot be written/,
  )
}, 30_000)

it('writes one JSON line an event, whatever stands in the request', async () => {
  const { base, log } = await serverProcess({ DATABASE_URL })
  await fetch(`${base}/a%0d%0a%1b[31m{"level":60}?token=canary-in-the-query`, {
    headers: { 'user-agent': 'canary-agent', authorization: 'canary-authorization', cookie: 'poleshelf=canary-cookie' },
  })
  await fetch(`${base}/${'x'.repeat(7000)}`)
  const lines = log()
  expect(lines.length).toBeGreaterThanOrEqual(3)
  expect(lines.every((line) => typeof line['time'] === 'string' && String(line['time']).endsWith('Z'))).toBe(true)
  expect(JSON.stringify(lines)).not.toContain('canary')
  expect(Math.max(...lines.map((line) => JSON.stringify(line).length))).toBeLessThan(3000)
}, 30_000)
