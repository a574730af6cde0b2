import { createHmac } from 'node:crypto'
import { Worker } from 'node:worker_threads'
import { ProblemError } from '#shared/problems'

export const BCRYPT_COST = 12
const AT_ONCE = 2
const WAITING_MAX = 100

interface Job {
  secret: string
  cost: number
  against?: string
}
interface WaitingJob extends Job {
  resolve: (answer: string | boolean) => void
  reject: (error: unknown) => void
}

/**
 * Passwords at rest: bcrypt over base64(HMAC-SHA-384(pepper, password)), since bcrypt reads 72 bytes only. The work is
 * done in at most two worker threads, so that sign-ins never hold up other requests.
 *
 * Source: OWASP password storage cheat sheet, "pre-hashing passwords with bcrypt".
 */
export function passwordHasher({ pepper, cost = BCRYPT_COST }: { pepper: string; cost?: number }) {
  const secretOf = (password: string) =>
    createHmac('sha384', pepper).update(password.normalize('NFC'), 'utf8').digest('base64')
  const queue = workerQueue()
  let stranger: Promise<string> | null = null
  const strangersHash = () => (stranger ??= queue.run({ secret: secretOf('nobody'), cost }) as Promise<string>)

  return {
    hash: (password: string) => queue.run({ secret: secretOf(password), cost }) as Promise<string>,
    /** Takes as long for nobody (null) as for somebody, and is then false. */
    async verify(password: string, against: string | null): Promise<boolean> {
      const same = (await queue.run({
        secret: secretOf(password),
        cost,
        against: against ?? (await strangersHash()),
      })) as boolean
      return same && against !== null
    },
    /** Whether the hash was made with a lower cost than today's. */
    needsRehash: (hash: string) => Number(/^\$2[aby]\$(\d\d)\$/.exec(hash)?.[1] ?? 0) < cost,
    /** Makes the hash that strangers are compared with, ahead of the first sign-in. */
    warmUp: async () => void (await strangersHash()),
    close: () => queue.close(),
  }
}
export type PasswordHasher = ReturnType<typeof passwordHasher>

function workerQueue() {
  const waiting: WaitingJob[] = []
  const workers: Worker[] = []
  const idle: Worker[] = []
  const running = new Map<Worker, WaitingJob>()

  const start = () => {
    const worker = new Worker(new URL('./hash-worker.mjs', import.meta.url), { execArgv: [] })
    workers.push(worker)
    worker.on('message', ({ answer }: { answer: string | boolean }) => {
      running.get(worker)?.resolve(answer)
      running.delete(worker)
      worker.unref()
      idle.push(worker)
      next()
    })
    worker.on('error', (error) => {
      running.get(worker)?.reject(error)
      running.delete(worker)
      workers.splice(workers.indexOf(worker), 1)
      next()
    })
    return worker
  }
  const next = () => {
    if (waiting.length === 0) return
    const worker = idle.pop() ?? (workers.length < AT_ONCE ? start() : undefined)
    if (!worker) return
    const { resolve, reject, ...job } = waiting.shift()!
    running.set(worker, { resolve, reject, ...job })
    worker.ref()
    worker.postMessage(job)
  }

  return {
    run: (job: Job) =>
      new Promise<string | boolean>((resolve, reject) => {
        if (waiting.length >= WAITING_MAX)
          return reject(new ProblemError('overloaded', 'Many people sign in at this moment; try again shortly.'))
        waiting.push({ ...job, resolve, reject })
        next()
      }),
    close: async () => void (await Promise.all(workers.map((worker) => worker.terminate()))),
  }
}
