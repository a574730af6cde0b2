import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { requireSpace } from './data-folder.mjs'
import { lastLines, run } from './processes.mjs'
import { Refusal } from './report.mjs'

const NEEDED_MEGABYTES = 900

/**
 * Installs the npm packages when they are missing or not those of package-lock.json.
 * @param {string} root
 * @returns {Promise<string>} what was done
 */
export async function ensurePackages(root) {
  if (arePackagesAsLocked(root)) return 'there'
  requireSpace(root, NEEDED_MEGABYTES, 'make room there')
  const npm = process.env['npm_execpath']
  const [program, first] = npm?.endsWith('.js') ? [process.execPath, [npm]] : ['npm', []]
  const install = (...how) =>
    run(program, [...first, ...how, '--ignore-scripts', '--include=dev', '--no-audit', '--no-fund'], { cwd: root })
  let outcome = await install('ci')
  // `ci` refuses a lock file without the packages that are only for other platforms, which registries may lack; this
  // keeps to the lock file just the same for all that it names.
  if (outcome.output.includes('EUSAGE')) outcome = await install('install', '--no-save')
  if (outcome.code !== 0)
    throw new Refusal(
      `The npm packages could not be installed; is the registry within reach? It said last:\n${lastLines(outcome.output)}`,
    )
  return 'installed'
}

/** Whether npm's own record of what it installed names every package of the lock file in its version. */
export function arePackagesAsLocked(root) {
  const locked = packagesIn(join(root, 'package-lock.json'))
  const installed = packagesIn(join(root, 'node_modules', '.package-lock.json'))
  if (!locked || !installed) return false
  return Object.entries(locked).every(
    ([path, { version, optional }]) =>
      path === '' || (optional && !installed[path]) || installed[path]?.version === version,
  )
}

/** @returns {Record<string, { version?: string, optional?: boolean }> | null} */
function packagesIn(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8')).packages
  } catch {
    return null
  }
}
