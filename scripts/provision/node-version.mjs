import { Refusal } from './report.mjs'

const LEAST = [20, 19]
/** First releases without CVE-2026-111497, by major version. */
const MENDED = { 22: [22, 23, 4], 24: [24, 22, 1], 26: [26, 12, 1] }
const ADVICE = 'Node.js 22.23.4, 24.22.1 or newer is advised'

/**
 * @param {string} [version] as process.versions.node gives it
 * @returns {string | null} what to warn of
 * @throws {Refusal} when Poleshelf cannot run on it
 */
export function checkNode(version = process.versions.node) {
  const parts = version.split('.').map(Number)
  if (isBefore(parts, LEAST))
    throw new Refusal(`Poleshelf needs Node.js ${LEAST.join('.')} or newer, and this is ${version}. ${ADVICE}.`)
  const major = parts[0] ?? 0
  if (major <= 20) return `Node.js ${version} gets no security fixes any more (20 ended on 2026-04-30). ${ADVICE}.`
  const mended = MENDED[major]
  if (mended && isBefore(parts, mended))
    return `Node.js ${version} lacks the fix of CVE-2026-111497; ${mended.join('.')} has it.`
  if (major % 2 === 1) return `Node.js ${version} is not a long-term release. ${ADVICE}.`
  return null
}

/** @param {number[]} version @param {readonly number[]} other */
function isBefore(version, other) {
  for (const [i, limit] of other.entries()) if (version[i] !== limit) return (version[i] ?? 0) < limit
  return false
}
