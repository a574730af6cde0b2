import type { z } from 'zod'
import { ProblemError, type Problem } from '#shared/problems'

const escaped = (step: PropertyKey): string => String(step).replaceAll('~', '~0').replaceAll('/', '~1')

/**
 * Input in the shape of its schema.
 * @param base JSON pointer of the input's own place: `#` for a body, `#/query`, `#/path`
 * @throws {ProblemError} 'request-not-valid' with every problem at its JSON pointer (RFC 6901)
 */
export function validated<S extends z.ZodType>(schema: S, input: unknown, base: string): z.output<S> {
  const outcome = schema.safeParse(input)
  if (outcome.success) return outcome.data
  const [first, ...more] = outcome.error.issues.flatMap((issue) => problemsOf(issue, base))
  throw new ProblemError('request-not-valid', first!.detail, first, more)
}

function problemsOf(issue: z.core.$ZodIssue, base: string): Problem[] {
  const pointer = [base, ...issue.path.map(escaped)].join('/')
  const name = issue.path.length > 0 ? String(issue.path.at(-1)) : null
  if (issue.code === 'unrecognized_keys')
    return issue.keys.map((key) => ({
      code: 'request-not-valid',
      detail: `"${key.slice(0, 60)}" is not known here.`,
      pointer: `${pointer}/${escaped(key)}`,
    }))
  return [{ code: 'request-not-valid', detail: sentence(issue, name), pointer }]
}

function sentence(issue: z.core.$ZodIssue, name: string | null): string {
  if (issue.message.endsWith('received undefined')) return name ? `"${name}" is missing.` : 'The body is missing.'
  const said = issue.message.replace(/^Invalid input: /, '')
  if (!said.startsWith('expected') && /^[A-Z].*\.$/s.test(said)) return said
  const clean = said.replace(/[.]?$/, '.')
  return name ? `"${name.slice(0, 60)}": ${clean}` : clean
}
