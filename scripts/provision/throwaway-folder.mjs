import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { isAlive, processesWithArgument, stopProcess } from './processes.mjs'
import { endFormerServer } from './product-server.mjs'

const NAME = /^poleshelf-throwaway-(\d+)-\w+$/

/**
 * A folder for this run alone. Those of runs that were killed are removed, with what still runs on them.
 * @returns {Promise<{ path: string, remove: () => void }>}
 */
export async function throwawayFolder() {
  for (const name of readdirSync(tmpdir())) {
    const owner = NAME.exec(name)?.[1]
    if (owner !== undefined && !isAlive(Number(owner))) await removeAbandoned(join(tmpdir(), name))
  }
  const path = mkdtempSync(join(tmpdir(), `poleshelf-throwaway-${process.pid}-`))
  return { path, remove: () => rmSync(path, { recursive: true, force: true }) }
}

async function removeAbandoned(folder) {
  await endFormerServer(folder)
  for (const pid of processesWithArgument(`--datadir=${join(folder, 'database', 'data')}`))
    await stopProcess(pid, 10_000)
  rmSync(folder, { recursive: true, force: true })
}
