import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'
import { DOCUMENT_NAMES, HelpDocument } from '#shared/contracts/documents'
import { ProblemError } from '#shared/problems'
import { route } from '../http'
import type { PageRenderer } from '../page-rendering'

const Params = z.strictObject({ name: z.string().max(60) })

/** Help texts, kept as Markdown in content-docs/ and rendered as notes are. */
export const documentRoutes = ({ folder, renderPage }: { folder: string; renderPage: PageRenderer }) => [
  route(
    'GET /api/documents/:name',
    { role: 'reader', params: Params, answer: { 200: HelpDocument } },
    async ({ params }) => {
      const name = DOCUMENT_NAMES.find((one) => one === params.name)
      if (!name) throw new ProblemError('not-found', 'There is no such help text.')
      const [first = '', ...rest] = (await readFile(join(folder, `${name}.md`), 'utf8')).split('\n')
      const { html, contents } = renderPage(rest.join('\n'))
      return { name, title: first.replace(/^#\s*/, ''), html, contents }
    },
  ),
]
