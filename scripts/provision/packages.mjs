import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { requireSpace } from './data-folder.mjs'
import { runOrRefuse } from './processes.mjs'

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
  await runOrRefuse(
    'The npm packages could not be installed (is the registry within reach?)',
    program,
    [...first, 'ci', '--ignore-scripts', '--include=dev', '--no-audit', '--no-fund'],
    { cwd: root },
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
