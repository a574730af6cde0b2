import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import {
  CHROMIUM,
  checkNode,
  command,
  ensureClient,
  ensurePackages,
  ensureSystemPackages,
  environmentWithoutOurs,
  MARIADB,
  programPath,
  Refusal,
  ROOT,
  say,
  startThrowawayDatabase,
  step,
} from './provision/index.mjs'
import { endRunning, run } from './provision/processes.mjs'
import { onSignals } from './provision/signals.mjs'
import { throwawayFolder } from './provision/throwaway-folder.mjs'

const modules = join(ROOT, 'node_modules')
const CHECKS = [
  { name: 'Format', args: [join(modules, 'prettier', 'bin', 'prettier.cjs'), '--check', '.'] },
  { name: 'Lint', args: [join(modules, 'eslint', 'bin', 'eslint.js'), '.', '--max-warnings', '0'] },
  {
    name: 'Types',
    args: [join(modules, 'vue-tsc', 'bin', 'vue-tsc.js'), '--noEmit', '-p', 'tsconfig.json'],
  },
]

await command(async () => {
  const warning = checkNode()
  if (warning) say(warning)
  let isBrokenOff = false
  onSignals(
    () => {
      // What runs ends now, nothing new is begun, and what was started is undone on the way out.
      isBrokenOff = true
      endRunning()
    },
    () => process.exit(130),
  )

  const chosen = process.argv.slice(2)
  const counts = { passed: 0, failed: 0 }
  const count = (name, hasPassed) => {
    counts[hasPassed ? 'passed' : 'failed'] += 1
    say(`${name}: ${hasPassed ? 'passed' : 'failed'}`)
  }
  await provision()
  if (chosen.length === 0) {
    for (const { name, args } of CHECKS) count(name, await passes(args))
    count('Client build', await builds())
  }

  const tests = await runTests(chosen)
  counts.passed += tests.passed
  counts.failed += tests.failed
  say(`Tests: ${tests.passed} passed, ${tests.failed} failed`)
  if (isBrokenOff) throw new Refusal('The run was broken off.', 130)
  say(`${counts.passed} passed, ${counts.failed} failed`)
  process.exit(counts.failed === 0 ? 0 : 1)
})

async function provision() {
  // Needed with an outside DATABASE_URL too: some tests kill their server and so start one of their own.
  await step("MariaDB from Debian's packages", () => ensureSystemPackages(MARIADB))
  await step("Chromium from Debian's packages", () => ensureSystemPackages(CHROMIUM))
  await step('npm packages', () => ensurePackages(ROOT))
}

async function passes(args) {
  const { code } = await run(process.execPath, args, { cwd: ROOT, env: environmentWithoutOurs(), show: true })
  return code === 0
}

async function builds() {
  try {
    await step('Client build', () => ensureClient(ROOT))
    return true
  } catch (error) {
    if (!(error instanceof Refusal)) throw error
    say(error.message)
    return false
  }
}

/** Runs vitest on a database of this run; one more failure when it fails beside its tests. */
async function runTests(chosen) {
  const folder = await throwawayFolder()
  const database = await startThrowawayDatabase({ outsideUrl: process.env['DATABASE_URL'], onTrouble: say })
  try {
    const report = join(folder.path, 'report.json')
    const reporters = ['--reporter=default', '--reporter=json', `--outputFile.json=${report}`]
    const { code } = await run(
      process.execPath,
      [join(modules, 'vitest', 'vitest.mjs'), 'run', ...reporters, ...chosen],
      {
        cwd: ROOT,
        env: {
          ...environmentWithoutOurs(),
          TEST_DATABASE_URL: database.url,
          TEST_DATABASE_PREFIX: database.prefix,
          CHROMIUM_PATH: programPath('chromium') ?? undefined,
        },
        show: true,
      },
    )
    const { passed, failed } = countsIn(report)
    return { passed, failed: code !== 0 && failed === 0 ? 1 : failed }
  } finally {
    await database.stop()
    folder.remove()
  }
}

/** Tests in vitest's report; a file that could not be loaded at all counts as one that failed. */
function countsIn(report) {
  try {
    const { numPassedTests, numFailedTests, testResults } = JSON.parse(readFileSync(report, 'utf8'))
    const unloaded = testResults.filter(
      ({ status, assertionResults }) => status === 'failed' && !assertionResults.some((one) => one.status === 'failed'),
    )
    return { passed: numPassedTests, failed: numFailedTests + unloaded.length }
  } catch {
    return { passed: 0, failed: 0 }
  }
}
