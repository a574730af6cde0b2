import { accessSync, constants } from 'node:fs'
import { delimiter, join } from 'node:path'
import { run } from './processes.mjs'
import { Refusal } from './report.mjs'

const USUAL_FOLDERS = ['/usr/local/sbin', '/usr/local/bin', '/usr/sbin', '/usr/bin', '/sbin', '/bin']

/** The server's programs without the system's own service, account and configuration. */
export const MARIADB = {
  programs: ['mariadbd', 'mariadb-install-db', 'my_print_defaults'],
  packages: ['mariadb-server-core', 'mariadb-client-core'],
}
export const CHROMIUM = { programs: ['chromium'], packages: ['chromium'] }

/** Path of a program, looked for where system programs lie too; null when there is none. */
export function programPath(name) {
  for (const folder of [...(process.env['PATH'] ?? '').split(delimiter).filter(Boolean), ...USUAL_FOLDERS]) {
    try {
      accessSync(join(folder, name), constants.X_OK)
      return join(folder, name)
    } catch {
      // Not in this folder.
    }
  }
  return null
}

const areThere = ({ programs }) => programs.every((name) => programPath(name) !== null)

/**
 * Installs programs from Debian's packages when they are missing: as root, or by sudo when that asks for no password.
 * @param {{ programs: string[], packages: string[] }} wanted
 * @returns {Promise<string>} what was done
 * @throws {Refusal} with the command to run when that is not allowed or fails
 */
export async function ensureSystemPackages(wanted) {
  if (areThere(wanted)) return 'there'
  const install = ['install', '-y', '--no-install-recommends', ...wanted.packages]
  const byHand = `sudo apt-get update && sudo apt-get ${install.join(' ')}`
  const named = wanted.packages.join(' and ')
  if (!programPath('apt-get'))
    throw new Refusal(
      `${wanted.programs[0]} is missing, and this is not a Debian system; install it, then start again.`,
    )
  const before = await prefix()
  if (!before)
    throw new Refusal(`Debian's ${named} must be installed first, which needs an administrator. Run:\n    ${byHand}`)
  // The first install may do without fresh lists; stale ones point at files that are gone.
  let output = ''
  for (const args of [['update'], install]) {
    const outcome = await run(before.program, [...before.args, ...args], { env: before.env })
    output = outcome.output
    if (outcome.code !== 0 && args === install) break
  }
  if (!areThere(wanted))
    throw new Refusal(
      `Debian's ${named} could not be installed; it said last: ${output.trim().split('\n').at(-1)}\nBy hand:\n    ${byHand}`,
    )
  return 'installed'
}

/** How apt-get is run here: as root, by sudo, or not at all. */
async function prefix() {
  const apt = ['-o', 'DPkg::Lock::Timeout=300', '-q']
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
  if (process.getuid?.() === 0) return { program: 'apt-get', args: apt, env }
  const { code } = await run('sudo', ['-n', 'true'])
  if (code !== 0) return null
  return { program: 'sudo', args: ['-n', 'env', 'DEBIAN_FRONTEND=noninteractive', 'apt-get', ...apt], env }
}
