import mysql from 'mysql2/promise'
import { connectionOptions } from './pool'

const ALL = 'SELECT, INSERT, UPDATE, DELETE'
const KEEP = 'SELECT, INSERT'

/** What may still change on a revision: its status and what approval or withdrawal writes down. */
const REVISION_STATUS_COLUMNS =
  'status, approved_by_id, approved_by_name, approved_by_role, approved_at, withdrawn_reason'

/** What the serving account may do, table by table: revisions and sizings cannot change even with its password. */
export const RUNTIME_GRANTS: Readonly<Record<string, string>> = {
  people: ALL,
  sessions: ALL,
  rate_limits: ALL,
  counters: 'SELECT, UPDATE',
  idempotency_keys: ALL,
  blocks: 'SELECT, INSERT, UPDATE',
  revisions: `${KEEP}, UPDATE (${REVISION_STATUS_COLUMNS})`,
  block_links: KEEP,
  sizings: KEEP,
  seed_marks: KEEP,
  migrations: 'SELECT',
}

/**
 * Gives the serving account its rights and nothing else; makes the account when it is missing and that is allowed.
 * @throws {Error} when the account cannot be made or reached
 */
export async function grantRuntime(adminUrl: string, runtimeUrl: string): Promise<void> {
  const { database } = connectionOptions(adminUrl)
  const runtime = connectionOptions(runtimeUrl)
  if (runtime.user === connectionOptions(adminUrl).user) return
  const { database: _none, ...adminServer } = connectionOptions(adminUrl)
  const admin = await mysql.createConnection(adminServer)
  try {
    const account = (await accountOf(runtimeUrl)) ?? (await makeAccount(admin, runtimeUrl))
    for (const [table, rights] of Object.entries(RUNTIME_GRANTS))
      await admin.query(`GRANT ${rights} ON ${mysql.escapeId(database!)}.${mysql.escapeId(table)} TO ${account}`)
  } finally {
    admin.destroy()
  }
}

/** The account as the server knows it, 'user'@'host'; null when it does not let us in. */
async function accountOf(url: string): Promise<string | null> {
  const { database: _none, ...server } = connectionOptions(url)
  const connection = await mysql.createConnection(server).catch((error: { errno?: number }) => {
    if (error.errno === 1045 || error.errno === 1698) return null
    throw error
  })
  if (!connection) return null
  try {
    const [rows] = await connection.query<mysql.RowDataPacket[]>('SELECT CURRENT_USER() AS account')
    return quoted(String(rows[0]?.['account']))
  } finally {
    connection.destroy()
  }
}

async function makeAccount(admin: mysql.Connection, url: string): Promise<string> {
  const { user, password } = connectionOptions(url)
  const account = quoted(`${user}@%`)
  await admin.query(`CREATE USER IF NOT EXISTS ${account} IDENTIFIED BY ${mysql.escape(password)}`)
  return (await accountOf(url)) ?? account
}

function quoted(account: string): string {
  const at = account.lastIndexOf('@')
  return `${mysql.escape(account.slice(0, at))}@${mysql.escape(account.slice(at + 1))}`
}
