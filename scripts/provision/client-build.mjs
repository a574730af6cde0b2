import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { runOrRefuse } from './processes.mjs'

/** What the built client is made from. */
const SOURCES = ['src', 'shared', 'public', 'index.html', 'quasar.config.ts', 'tsconfig.json', 'package-lock.json']

/**
 * Builds the client when its sources have changed since the last build.
 * @param {string} root
 * @returns {Promise<string>} what was done
 */
export async function ensureClient(root) {
  const built = join(root, 'dist', 'spa')
  const stamp = join(root, 'dist', '.stamp')
  const hash = hashOf(root)
  if (existsSync(join(built, 'index.html')) && existsSync(stamp) && readFileSync(stamp, 'utf8') === hash)
    return 'unchanged'
  rmSync(stamp, { force: true })
  await runOrRefuse(
    'The client could not be built',
    process.execPath,
    [join(root, 'node_modules', '@quasar', 'app-vite', 'bin', 'quasar.js'), 'build'],
    { cwd: root, env: { ...process.env, NODE_ENV: 'production', CI: '1' } },
  )
  writeFileSync(stamp, hash)
  return 'built'
}

/** SHA-256 over names and contents of the sources. */
function hashOf(root) {
  const hash = createHash('sha256')
  const files = SOURCES.flatMap((name) => filesUnder(root, name)).sort()
  for (const file of files) {
    const bytes = readFileSync(join(root, file))
    hash.update(`${file}\0${bytes.length}\0`).update(bytes)
  }
  return hash.digest('hex')
}

function filesUnder(root, name) {
  const path = join(root, name)
  if (!existsSync(path)) return []
  try {
    return readdirSync(path, { withFileTypes: true }).flatMap((entry) => filesUnder(root, join(name, entry.name)))
  } catch (error) {
    if (error.code === 'ENOTDIR') return [name]
    throw error
  }
}
