import { setTimeout as pause } from 'node:timers/promises'
import type { Logger } from 'pino'
import { durabilityNotes, type DurabilityNote } from './durability'
import { databaseErrorOf } from './failure'
import { grantRuntime } from './grants'
import { migrate } from './migrate'
import { openPool } from './pool'
import { queriesOver } from './queries'
import { transactionsOver } from './transaction'

export type { DurabilityNote } from './durability'
export { isDuplicate, problemOfDatabase } from './failure'
export { nextNumber } from './counters'
export type { Queries } from './queries'
export type { RunTransaction, Transaction } from './transaction'

export interface DatabaseSettings {
  /** May migrate. */
  url: string
  /** Serves, with least rights; the same address when there is none. */
  runtimeUrl: string
  connections: number
  migrations: string
  log: Logger
  snapshotIsolation?: boolean
  acquireMs?: number
  statementMs?: number
}

const PROBE_EVERY_MS = 400
const PROBE_WITHIN_MS = 1500

/**
 * The database as the services see it. It may be away when the server starts, or go away later: `isReady()` says so,
 * and it comes back by itself.
 */
export function openDatabase(settings: DatabaseSettings) {
  const { log } = settings
  let state: 'starting' | 'ready' | 'away' | 'stopped' = 'starting'
  let notes: DurabilityNote[] = []
  let sentence = 'The database has not answered yet.'
  const pool = openPool({
    ...settings,
    url: settings.runtimeUrl,
    onTrouble: (error) => {
      if (state === 'ready') void suspect(error)
    },
  })
  const leave = (error: unknown) => {
    state = 'away'
    sentence = 'The database does not answer.'
    log.error({ code: databaseErrorOf(error)?.code, errno: databaseErrorOf(error)?.errno }, 'database away')
    void comeBack()
  }
  const probe = () => pool.query({ sql: 'SELECT 1', timeout: PROBE_WITHIN_MS })
  let isSuspected = false
  /** One statement that took too long is no reason to turn everybody away: the database is asked first. */
  const suspect = async (error: unknown) => {
    if (databaseErrorOf(error)?.code !== 'PROTOCOL_SEQUENCE_TIMEOUT') return leave(error)
    if (isSuspected) return
    isSuspected = true
    try {
      await probe()
    } catch {
      if (state === 'ready') leave(error)
    } finally {
      isSuspected = false
    }
  }
  const takeNotes = async () => {
    notes = await durabilityNotes(pool)
    for (const note of notes) log[note.level === 'note' ? 'info' : 'warn']({ setting: note.setting }, note.detail)
    const refused = notes.find((note) => note.level === 'refused')
    if (refused) throw new Error(`${refused.setting}: ${refused.detail}`)
  }

  const comeBack = async () => {
    while (state === 'away') {
      await pause(PROBE_EVERY_MS)
      try {
        await probe()
        await takeNotes()
        if (state !== 'away') return
        state = 'ready'
        log.info('database back')
      } catch {
        // Still away; the next round asks again.
      }
    }
  }

  /** Migrates, grants and runs what must be there before serving; repeats until the database lets it. */
  const prepare = async (afterMigration: (() => Promise<void>)[]) => {
    let said = ''
    for (let waitMs = 250; state === 'starting'; waitMs = Math.min(2000, waitMs * 1.5)) {
      try {
        await migrate({ url: settings.url, folder: settings.migrations, log: (words) => log.info(words) })
        if (settings.runtimeUrl !== settings.url) await grantRuntime(settings.url, settings.runtimeUrl)
        await takeNotes()
        for (const step of afterMigration) await step()
        if (state === 'starting') state = 'ready'
        return
      } catch (error) {
        const found = databaseErrorOf(error)
        sentence = found
          ? `The database does not answer (${found.code ?? found.errno}).`
          : 'The start did not finish; the log says why.'
        if (said !== String(error)) log.error({ err: error }, 'start waits for the database')
        said = String(error)
        await pause(waitMs)
      }
    }
  }

  return {
    queries: queriesOver(pool),
    transaction: transactionsOver(pool, (error, attempt) =>
      log.info(
        { attempt, errno: databaseErrorOf(error)?.errno, code: databaseErrorOf(error)?.code },
        'transaction again',
      ),
    ),
    pool,
    /** Whether requests may ask it now. */
    isReady: () => state === 'ready',
    /** What is the matter, as a sentence, and what was noted about its settings. */
    condition: () => ({ state, sentence: state === 'ready' ? 'The database answers.' : sentence, notes }),
    prepare,
    /** Asks the database now. @throws when it does not answer within 1.5 s */
    probe,
    async close() {
      state = 'stopped'
      await Promise.race([pool.close(), pause(1000, undefined, { ref: false })])
    },
  }
}

export type Database = ReturnType<typeof openDatabase>
