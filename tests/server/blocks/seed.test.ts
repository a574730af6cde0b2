import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { pino } from 'pino'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { blockRepository, loadSeedBlocks } from '../../../src-server/blocks'
import { testServer, type Client, type TestServer } from '../../support/server'
import { houseBlock } from '../../support/shelf'

let server: TestServer
let reader: Client
const folder = mkdtempSync(join(tmpdir(), 'poleshelf-seed-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

const put = (file: string, text: string) => writeFileSync(join(folder, file), text)
const drop = (file: string) => rmSync(join(folder, file))
const load = async () => {
  const { database, people } = server.assembly
  const [author] = await people.ofRole(database.queries, 'editor')
  const [approver] = await people.ofRole(database.queries, 'lead')
  await loadSeedBlocks({
    database,
    blocks: blockRepository,
    folder,
    author: author!,
    approver: approver!,
    now: () => new Date(),
    log: pino({ level: 'silent' }),
  })
}
const titleOf = async (code: string) => (await reader.get(`/api/blocks/${code}`)).body.titleBlock?.title as string

beforeAll(async () => {
  server = await testServer()
  reader = await server.signedIn('reader')
}, 90_000)

describe('seed blocks', () => {
  it('are loaded once, and a file that an upgrade changed is left alone', async () => {
    put('lp1-inv.md', houseBlock('lp1-inv'))
    await load()
    expect(await titleOf('lp1-inv')).toBe('Inverting low-pass, first order')
    put('lp1-inv.md', houseBlock('lp1-inv').replace('title: Inverting', 'title: Improved inverting'))
    put('hp1-inv.md', houseBlock('hp1-inv'))
    await load()
    expect(await titleOf('lp1-inv')).toBe('Inverting low-pass, first order')
    expect(await titleOf('hp1-inv')).toBe('Inverting high-pass, first order')
    expect((await reader.get('/api/blocks/lp1-inv')).body.history).toHaveLength(1)
  })

  it('are loaded once by several nodes at the same moment', async () => {
    put('lp2-mfb.md', houseBlock('lp2-mfb'))
    await Promise.all([load(), load(), load()])
    const { rows } = (await reader.get('/api/blocks?search=lp2-mfb')).body as { rows: { code: string }[] }
    expect(rows.filter((row) => row.code === 'lp2-mfb')).toHaveLength(1)
  })

  it('are refused with file, line and column when one does not read, and nothing of it stays', async () => {
    put('lp2-sku.md', houseBlock('lp2-sku').replace('R1: { default: 7.68k', 'R1: { default: 7.68nF'))
    await expect(load()).rejects.toThrow(/^content-seed\/lp2-sku\.md:\d+:\d+ .*\.$/)
    expect((await reader.get('/api/blocks/lp2-sku')).status).toBe(404)
    put('lp2-sku.md', houseBlock('lp2-sku'))
    await load()
    expect((await reader.get('/api/blocks/lp2-sku')).status).toBe(200)
  })

  it('are refused when the self-check differs', async () => {
    put('lp1-ni.md', houseBlock('lp1-ni').replace('formula: 1/(2*pi*R1*C1), unit', 'formula: 1/(R1*C1), unit'))
    await expect(load()).rejects.toThrow(/^content-seed\/lp1-ni\.md: f_c differs from the circuit\./)
    expect((await reader.get('/api/blocks/lp1-ni')).status).toBe(404)
    drop('lp1-ni.md')
  })

  it('never replace a block of the same code that people made', async () => {
    put('other-name.md', houseBlock('hp1-inv').replace('title: Inverting', 'title: Intruding'))
    await load()
    expect(await titleOf('hp1-inv')).toBe('Inverting high-pass, first order')
  })
})

describe('help texts', () => {
  it.each([
    ['block-format', 'How a block page is written'],
    ['computing', 'Computing from a script'],
  ])('%s is served, rendered as notes are', async (name, title) => {
    const { status, body } = await reader.get(`/api/documents/${name}`)
    expect(status).toBe(200)
    expect(body).toMatchObject({ name, title })
    expect(body.contents.length).toBeGreaterThan(4)
    expect(body.html).not.toContain('data-widget')
    expect(body.html).toContain('<pre tabindex="0"><code>')
  })

  it.each(['nothing', '..%2f..%2fpackage', '__proto__', 'block-format.md'])('%s is not', async (name) => {
    expect((await reader.get(`/api/documents/${name}`)).status).toBe(404)
  })
})
