import { mkdirSync, mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { beforeAll, expect, it } from 'vitest'
import { testServer, type Client } from '../../support/server'

let visitor: Client

beforeAll(async () => {
  // A folder whose name begins with a dot further up must not hide what is in it.
  const folder = join(mkdtempSync(join(tmpdir(), 'poleshelf-client-')), '.built', 'spa')
  mkdirSync(join(folder, 'assets'), { recursive: true })
  writeFileSync(join(folder, 'index.html'), '<!doctype html><title>Poleshelf</title>')
  writeFileSync(join(folder, 'assets', 'index-4f2a.js'), 'export {}')
  writeFileSync(join(folder, 'assets', 'index-4f2a.js.map'), '{}')
  writeFileSync(join(folder, 'favicon.svg'), '<svg xmlns="http://www.w3.org/2000/svg"/>')
  visitor = (await testServer({ environment: { CLIENT_DIR: folder } })).stranger()
}, 60_000)

it.each(['/', '/shelf', '/block/lp1-inv/3', '/sizings/S-12'])(
  '%s is the page, asked for anew each time',
  async (path) => {
    const answer = await visitor.get(path)
    expect(answer.status).toBe(200)
    expect(answer.text).toContain('<title>Poleshelf</title>')
    expect(answer.headers.get('content-type')).toMatch(/^text\/html/)
    expect(answer.headers.get('cache-control')).toBe('no-cache')
  },
)

it('files with a hash in their name are kept for good, others are asked for anew', async () => {
  const script = await visitor.get('/assets/index-4f2a.js')
  expect(script.headers.get('content-type')).toMatch(/javascript/)
  expect(script.headers.get('cache-control')).toBe('public, max-age=31536000, immutable')
  expect((await visitor.get('/favicon.svg')).headers.get('cache-control')).toBe('no-cache')
})

it.each([
  '/assets/gone-1234.js',
  '/assets/index-4f2a.js.map',
  '/assets/',
  '/api/blocks.css',
  '/index.html',
  '/.built/x',
])('%s is a 404 problem', async (path) => {
  const answer = await visitor.get(path)
  expect([answer.status, answer.body?.type]).toEqual([404, '/problems/not-found'])
})

it('an answer for a file that has not changed is 304 without a body', async () => {
  const first = await visitor.get('/favicon.svg')
  const again = await visitor.get('/favicon.svg', {
    'if-modified-since': first.headers.get('last-modified')!,
    'cache-control': 'max-age=0',
  })
  expect([again.status, again.text]).toEqual([304, ''])
  expect(again.headers.get('content-security-policy')).toContain("default-src 'none'")
})
