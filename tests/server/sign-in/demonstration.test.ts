import { mkdtempSync, readFileSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { readConfiguration } from '../../../src-server/app/configuration'
import { testServer } from '../../support/server'

const start = async (dataDir: string, demo: string) => testServer({ environment: { DEMO: demo, DATA_DIR: dataDir } })

describe('demonstration accounts', () => {
  it('are made at the first start with passwords of their own, in a file for its owner alone', async () => {
    const [one, two] = [1, 2].map(() => mkdtempSync(join(tmpdir(), 'poleshelf-demo-'))) as [string, string]
    const server = await start(one, '1')
    await start(two, '1')
    const read = (folder: string) =>
      JSON.parse(readFileSync(join(folder, 'accounts.json'), 'utf8')) as {
        role: string
        email: string
        password: string
      }[]
    expect(statSync(join(one, 'accounts.json')).mode & 0o777).toBe(0o600)
    expect(read(one).map((account) => account.role)).toEqual(['reader', 'editor', 'lead'])
    expect(read(one).map((account) => account.password)).not.toEqual(read(two).map((account) => account.password))
    for (const { email, password } of read(one)) {
      expect(password.length).toBeGreaterThanOrEqual(20)
      expect((await server.stranger().post('/api/sign-in', { email, password })).status).toBe(200)
    }
    const again = await testServer({ environment: { DEMO: '1', DATA_DIR: one }, database: server.database })
    const lead = read(one)[2]!
    expect((await again.stranger().post('/api/sign-in', { email: lead.email, password: lead.password })).status).toBe(
      200,
    )
  }, 60_000)

  it('are not made without being asked for', async () => {
    const server = await start(mkdtempSync(join(tmpdir(), 'poleshelf-demo-')), '0')
    const [rows] = await server.database.root.query("SELECT * FROM people WHERE email LIKE '%marlow%'")
    expect(rows).toEqual([])
  }, 60_000)

  it('are refused where others than this machine can reach them, unless forced', () => {
    const environment = { DATABASE_URL: 'mysql://a@127.0.0.1/b', HOST: '0.0.0.0', BASE_URL: 'https://shelf.example' }
    expect(readConfiguration({ ...environment, DEMO: '1' })).toMatchObject({ ok: false })
    expect(readConfiguration({ ...environment, DEMO: 'force' })).toMatchObject({ ok: true })
  })
})
