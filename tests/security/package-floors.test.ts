import { readFileSync } from 'node:fs'
import { expect, it } from 'vitest'

interface Lock {
  packages: Record<string, { version?: string; resolved?: string }>
}
const lock = JSON.parse(readFileSync('package-lock.json', 'utf8')) as Lock

/** Versions below these have a published advisory. Sources: the CVE and GHSA records named beside each. */
const FLOORS: Readonly<Record<string, { floor: string; because: string }>> = {
  mathjs: { floor: '15.2.0', because: 'CVE-2026-41139, CVE-2026-40897' },
  'drizzle-orm': { floor: '0.45.2', because: 'CVE-2026-39356' },
  mysql2: { floor: '3.9.8', because: 'code execution, injection, prototype pollution' },
  dompurify: { floor: '3.4.0', because: 'CVE-2026-65903, CVE-2026-0540' },
  jsdom: { floor: '29.1.0', because: 'part of the trusted base of sanitising' },
  katex: { floor: '0.16.21', because: 'CVE-2025-23207' },
  'markdown-it': { floor: '15.0.2', because: 'CVE-2026-111759, CVE-2026-48988' },
  echarts: { floor: '6.1.0', because: 'CVE-2026-45249' },
  express: { floor: '5.0.0', because: 'CVE-2026-12590 and others' },
  'body-parser': { floor: '2.3.0', because: 'CVE-2026-12590' },
  'path-to-regexp': { floor: '8.4.0', because: 'CVE-2026-4926, CVE-2026-4923' },
  qs: { floor: '6.16.0', because: 'GHSA-x5fp-wj9c-mxmx, GHSA-4mjr-xmp4-gh2g' },
  multer: { floor: '2.2.0', because: 'CVE-2026-5079, CVE-2026-5038' },
  nodemailer: { floor: '10.4.1', because: 'CVE-2026-125755, CVE-2026-121425' },
}

const isBelow = (version: string, floor: string): boolean => {
  const [have, need] = [version, floor].map((text) => text.split('-')[0]!.split('.').map(Number)) as [
    number[],
    number[],
  ]
  const at = need.findIndex((part, index) => part !== (have[index] ?? 0))
  return at >= 0 && (have[at] ?? 0) < need[at]!
}

it('tells a version below its floor', () => {
  expect(isBelow('0.45.1', '0.45.2')).toBe(true)
  expect(isBelow('0.46.0', '0.45.2')).toBe(false)
  expect(isBelow('15.2.0', '15.2.0')).toBe(false)
  expect(isBelow('8.10.0', '8.4.0')).toBe(false)
})

it('holds no served package below its floor', () => {
  const below = Object.entries(lock.packages).flatMap(([path, { version, ...entry }]) => {
    const name = path.split('node_modules/').at(-1)!
    const isDevelopment = 'dev' in entry && entry.dev === true
    const { floor } = FLOORS[name] ?? {}
    return version && floor && !isDevelopment && isBelow(version, floor) ? [`${path} ${version} < ${floor}`] : []
  })
  expect(below).toEqual([])
})

it('takes every package from the public registry', () => {
  const elsewhere = Object.values(lock.packages)
    .map((entry) => entry.resolved)
    .filter((address) => address && !address.startsWith('https://registry.npmjs.org/'))
  expect(elsewhere).toEqual([])
})
