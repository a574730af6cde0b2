import { randomBytes, randomUUID } from 'node:crypto'
import { link, mkdir, readFile, unlink, writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { z } from 'zod'

const Secrets = z.strictObject({ sessionSecret: z.string().min(32), pepper: z.string().min(32) })
type Secrets = z.output<typeof Secrets>

/**
 * What is kept outside the database: the key that signs cookies and the pepper of passwords. From the environment, else
 * from a file of the data folder that is readable by its owner alone, made at the first start.
 */
export async function secretsOf(given: {
  sessionSecret: string | null
  pepper: string | null
  dataDir: string
}): Promise<Secrets> {
  if (given.sessionSecret && given.pepper) return { sessionSecret: given.sessionSecret, pepper: given.pepper }
  const kept = await keptSecrets(join(given.dataDir, 'secrets.json'), given.dataDir)
  return { sessionSecret: given.sessionSecret ?? kept.sessionSecret, pepper: given.pepper ?? kept.pepper }
}

async function keptSecrets(file: string, folder: string): Promise<Secrets> {
  const read = async () => Secrets.parse(JSON.parse(await readFile(file, 'utf8')))
  try {
    return await read()
  } catch (error) {
    if ((error as { code?: string }).code !== 'ENOENT') throw error
  }
  const secret = () => randomBytes(32).toString('base64url')
  const draft = `${file}.${randomUUID()}`
  await mkdir(folder, { recursive: true, mode: 0o700 })
  await writeFile(draft, JSON.stringify({ sessionSecret: secret(), pepper: secret() }), { mode: 0o600 })
  // Linking fails when another start was faster; its secrets hold.
  await link(draft, file).catch((error: { code?: string }) => {
    if (error.code !== 'EEXIST') throw error
  })
  await unlink(draft)
  return read()
}
