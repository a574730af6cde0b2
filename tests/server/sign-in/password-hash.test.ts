import { afterAll, describe, expect, it } from 'vitest'
import { BCRYPT_COST, passwordHasher } from '../../../src-server/sign-in'

const pepper = 'p'.repeat(40)
const hasher = passwordHasher({ pepper })
const cheap = passwordHasher({ pepper, cost: 4 })
afterAll(() => Promise.all([hasher.close(), cheap.close()]))

describe('password hashes', () => {
  it('cost 2^12 and differ for the same password', async () => {
    const [one, two] = await Promise.all([hasher.hash('the same words'), hasher.hash('the same words')])
    expect(BCRYPT_COST).toBe(12)
    expect(one).toMatch(/^\$2[ab]\$12\$/)
    expect(one).not.toBe(two)
    expect(await hasher.verify('the same words', one!)).toBe(true)
  })

  it('do not hold up the event loop: twenty at once leave timers on time', async () => {
    const work = Array.from({ length: 20 }, () => hasher.verify('x', null))
    const lateMs: number[] = []
    const watching = (async () => {
      for (let i = 0; i < 40; i += 1) {
        const before = performance.now()
        await new Promise((done) => setTimeout(done, 10))
        lateMs.push(performance.now() - before - 10)
      }
    })()
    await watching
    expect(await Promise.all(work)).toEqual(Array.from({ length: 20 }, () => false))
    // Common practice: 100 ms on a quiet machine; three times as much is allowed here.
    expect(Math.max(...lateMs)).toBeLessThan(300)
  })

  it('tell a lower cost, so that the next sign-in raises it', async () => {
    const old = await cheap.hash('words')
    expect(hasher.needsRehash(old)).toBe(true)
    expect(hasher.needsRehash(await hasher.hash('words'))).toBe(false)
  })

  it('take as long for nobody as for somebody', async () => {
    const hash = await hasher.hash('words')
    const timeOf = async (against: string | null) => {
      const before = performance.now()
      await hasher.verify('guess', against)
      return performance.now() - before
    }
    await hasher.warmUp()
    const [known, unknown]: [number[], number[]] = [[], []]
    for (let i = 0; i < 5; i += 1) {
      known.push(await timeOf(hash))
      unknown.push(await timeOf(null))
    }
    const median = (times: number[]) => times.sort((a, b) => a - b)[2]!
    expect(median(unknown) / median(known)).toBeGreaterThan(0.5)
    expect(median(unknown) / median(known)).toBeLessThan(2)
  })

  it('need the pepper', async () => {
    const other = passwordHasher({ pepper: 'q'.repeat(40), cost: 4 })
    expect(await other.verify('words', await cheap.hash('words'))).toBe(false)
    await other.close()
  })
})
