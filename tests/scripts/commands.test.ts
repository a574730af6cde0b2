import { mkdtempSync, rmSync, symlinkSync, mkdirSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout as pause } from 'node:timers/promises'
import { afterAll, afterEach, describe, expect, it } from 'vitest'
import { run } from '../../scripts/provision/processes.mjs'
import { endFormerServer, startProductServer, untilServing } from '../../scripts/provision/product-server.mjs'
import { supervise } from '../../scripts/provision/supervised-child.mjs'

const folder = mkdtempSync(join(tmpdir(), 'poleshelf-commands-test-'))
afterAll(() => rmSync(folder, { recursive: true, force: true }))

describe('npm start', () => {
  const start = (environment: Record<string, string>) =>
    run(process.execPath, ['scripts/start.mjs'], {
      env: { PATH: process.env['PATH'], HOME: folder, ...environment },
    })
  it('refuses a misspelt setting with the near name, before it does anything', async () => {
    const { code, output } = await start({ DATABSE_URL: 'mysql://a:b@c/d' })
    expect(code).toBe(2)
    expect(output).toContain('DATABSE_URL is not a setting of Poleshelf; did you mean DATABASE_URL?')
    expect(output).not.toMatch(/^\s+at /m)
  })
  it('says in words that the data folder cannot be used', async () => {
    writeFileSync(join(folder, 'file'), '')
    const { code, output } = await start({ DATA_DIR: join(folder, 'file', 'sub') })
    expect(code).toBe(1)
    expect(output).toContain('cannot be made or used (ENOTDIR); DATA_DIR chooses another')
    expect(output).not.toMatch(/^\s+at /m)
  })
})

describe('a child that is kept running', () => {
  const stops: (() => Promise<void>)[] = []
  afterEach(async () => {
    for (const stop of stops.splice(0)) await stop()
  })
  const keep = (script: string, more: Partial<Parameters<typeof supervise>[0]> = {}) => {
    const said: string[] = []
    const child = supervise({
      name: 'The server',
      program: process.execPath,
      args: ['-e', script],
      spawnOptions: { stdio: ['ignore', 'pipe', 'ignore'] },
      untilReady: (started) => new Promise((done) => started.stdout!.once('data', () => done())),
      onTrouble: (words) => said.push(words),
      onGivenUp: (words) => said.push(`given up: ${words}`),
      ...more,
    })
    stops.push(() => child.stop(2000))
    return { child, said }
  }
  const STAYS = 'console.log("ready"); setInterval(() => {}, 1e6)'

  it('is started again after an unexpected end, and that is said', async () => {
    const { child, said } = keep(STAYS)
    await child.begin()
    const before = child.pid!
    process.kill(before, 'SIGKILL')
    await expect
      .poll(() => said, { timeout: 5000 })
      .toEqual(['The server ended unexpectedly (SIGKILL); it is started again.', 'The server runs again.'])
    expect(child.pid).not.toBe(before)
  })
  it('is given up after too many ends within a minute', async () => {
    const { child, said } = keep('console.log("ready"); setTimeout(() => process.exit(7), 20)', { endsAMinute: 2 })
    await child.begin()
    await expect
      .poll(() => said.at(-1), { timeout: 10_000 })
      .toMatch(/^given up: The server .*3 times within a minute\.$/)
  })
  it('is not tried again when its end is final', async () => {
    const { child, said } = keep('console.log("ready"); setTimeout(() => process.exit(2), 50)', {
      isFinal: (code) => code === 2,
    })
    await child.begin()
    await expect.poll(() => said, { timeout: 5000 }).toEqual(['given up: The server ended (2).'])
  })
  it('is not started again when it was asked to stop, and ends by force when it does not listen', async () => {
    const { child, said } = keep(`process.on('SIGTERM', () => {}); ${STAYS}`)
    await child.begin()
    await child.stop(200)
    await pause(400)
    expect(said).toEqual([])
    expect(() => process.kill(child.pid!, 0)).toThrow()
  })
  it('that ends while starting is told', async () => {
    await expect(keep('process.exit(3)').child.begin()).rejects.toThrow('The server ended while starting (3)')
  })
})

describe('the server as start runs it', () => {
  const checkout = (source: string) => {
    const root = mkdtempSync(join(folder, 'checkout-'))
    mkdirSync(join(root, 'src-server'))
    symlinkSync(join(process.cwd(), 'node_modules'), join(root, 'node_modules'))
    writeFileSync(join(root, 'src-server', 'main.ts'), source)
    return root
  }
  const environment = { PATH: process.env['PATH'] }

  it('tells its address, and start waits until it can serve', async () => {
    const root = checkout(`
      import { createServer, type Server } from 'node:http'
      const begun: number = Date.now()
      const server: Server = createServer((_asked, answer) => {
        answer.statusCode = Date.now() - begun < 600 ? 503 : 200
        answer.end('{}')
      })
      server.listen(0, '127.0.0.1', () => {
        console.log('POLESHELF_READY ' + JSON.stringify({ address: 'http://127.0.0.1:' + (server.address() as { port: number }).port }))
      })`)
    const server = await startProductServer({ root, dataDir: join(root, 'data'), environment, onTrouble: () => {} })
    try {
      await untilServing(server.address, () => {})
      expect((await fetch(`${server.address}/health/ready`)).status).toBe(200)
    } finally {
      await server.stop()
    }
    await expect(fetch(server.address)).rejects.toThrow()
  })
  it('that a killed start left running is ended by the next', async () => {
    const root = checkout(`console.log('POLESHELF_READY {"address":"x"}'); setInterval(() => {}, 1e6)`)
    const dataDir = join(root, 'data')
    const said: string[] = []
    const left = await startProductServer({
      root,
      dataDir,
      environment,
      onTrouble: (words: string) => void said.push(words),
      onGivenUp: () => {},
    })
    const { pid } = left
    await endFormerServer(join(root, 'other'))
    expect(() => process.kill(pid!, 0)).not.toThrow()
    await endFormerServer(dataDir)
    expect(() => process.kill(pid!, 0)).toThrow()
    await left.stop()
  })
  it('that refuses its configuration is quoted, without a second try', async () => {
    const root = checkout(`process.stderr.write('BASE_URL is plain http.\\n'); process.exit(2)`)
    await expect(startProductServer({ root, dataDir: join(root, 'data'), environment })).rejects.toThrow(
      /^BASE_URL is plain http\.$/,
    )
  })
})
