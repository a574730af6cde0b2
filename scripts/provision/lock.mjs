import { linkSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { isAlive, startTicks } from './processes.mjs'
import { Refusal } from './report.mjs'

/**
 * Takes the data folder for this process; a lock whose process is gone does not count.
 * @param {string} dataDir
 * @returns {{ tell: (address: string) => void, release: () => void }}
 * @throws {Refusal} when another start has it
 */
export function takeLock(dataDir) {
  const file = join(dataDir, 'lock.json')
  const draft = `${file}.${process.pid}`
  const own = { pid: process.pid, startTicks: startTicks(process.pid) }
  const write = (facts) => writeFileSync(draft, `${JSON.stringify(facts)}\n`, { mode: 0o600 })
  for (;;) {
    write(own)
    try {
      // Linking a file that is already whole: nobody ever reads half a lock.
      linkSync(draft, file)
      rmSync(draft)
      break
    } catch (error) {
      rmSync(draft, { force: true })
      if (error.code !== 'EEXIST') throw error
    }
    const text = readOrNull(file)
    const holder = holderIn(text)
    if (holder)
      throw new Refusal(
        `Poleshelf is already running from this data folder (process ${holder.pid})${holder.address ? ` at ${holder.address}` : ', still starting'}.`,
      )
    if (text !== null) setAside(file, draft, text)
  }
  return {
    tell(address) {
      write({ ...own, address })
      renameSync(draft, file)
    },
    release() {
      if (holderIn(readOrNull(file))?.pid === process.pid) rmSync(file, { force: true })
    },
  }
}

/** Removes a stale lock, unless another start has replaced it since it was read. */
function setAside(file, draft, staleText) {
  try {
    renameSync(file, draft)
    if (readOrNull(draft) !== staleText) linkSync(draft, file)
  } catch (error) {
    if (!['ENOENT', 'EEXIST'].includes(error.code)) throw error
  } finally {
    rmSync(draft, { force: true })
  }
}

/** @returns {{ pid: number, address?: string } | null} the living process that holds it */
function holderIn(text) {
  try {
    const facts = JSON.parse(text ?? '')
    return isAlive(facts.pid) && startTicks(facts.pid) === facts.startTicks ? facts : null
  } catch {
    return null
  }
}

function readOrNull(file) {
  try {
    return readFileSync(file, 'utf8')
  } catch {
    return null
  }
}
