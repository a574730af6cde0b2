import type { Pool } from './pool'

export interface DurabilityNote {
  /** Refused: the server would break a promise about every save. */
  level: 'note' | 'warning' | 'refused'
  setting: string
  detail: string
}

const MIN_PACKET_BYTES = 2 * 1024 * 1024

const ASKED = `SELECT VERSION() AS version, @@global.innodb_flush_log_at_trx_commit AS flush,
  @@global.innodb_doublewrite AS doublewrite, @@global.log_bin AS binlog, @@global.sync_binlog AS syncBinlog,
  @@global.character_set_server AS charset, @@global.sql_mode AS sqlMode, @@session.max_allowed_packet AS packet,
  @@session.sql_mode AS ownMode, @@session.time_zone AS zone, @@global.innodb_ft_min_token_size AS token`

/** Which of the server's settings touch what Poleshelf promises: named in the log and on the readiness page (D11). */
export async function durabilityNotes(pool: Pick<Pool, 'query'>): Promise<DurabilityNote[]> {
  const [rows] = await pool.query(ASKED)
  return notesOf((rows as Record<string, unknown>[])[0] ?? {})
}

/** The notes for what the server says about itself. */
export function notesOf(server: Record<string, unknown>): DurabilityNote[] {
  const notes: DurabilityNote[] = []
  const add = (level: DurabilityNote['level'], setting: string, detail: string) =>
    notes.push({ level, setting, detail })
  const isOff = (value: unknown) => ['0', 'OFF', 'false'].includes(String(value))
  if (Number(server['flush']) !== 1)
    add(
      'warning',
      'innodb_flush_log_at_trx_commit',
      `It is ${server['flush']}: a power cut can lose saved work; 1 keeps it.`,
    )
  if (isOff(server['doublewrite']))
    add('warning', 'innodb_doublewrite', 'It is off: a power cut can damage tables; ON protects them.')
  if (!isOff(server['binlog']) && Number(server['syncBinlog']) !== 1)
    add(
      'warning',
      'sync_binlog',
      `It is ${server['syncBinlog']}: replicas can lose saved work after a power cut; 1 keeps it.`,
    )
  if (!String(server['charset']).startsWith('utf8mb4'))
    add('note', 'character_set_server', `It is ${server['charset']}; tables and connections use utf8mb4 all the same.`)
  if (!String(server['sqlMode']).includes('STRICT'))
    add('note', 'sql_mode', 'The server is not strict; each connection sets the strict mode itself.')
  if (!String(server['ownMode']).includes('STRICT_ALL_TABLES') || server['zone'] !== '+00:00')
    add('refused', 'session settings', 'The server did not take the strict mode and UTC that each connection sets.')
  if (Number(server['packet']) < MIN_PACKET_BYTES)
    add('refused', 'max_allowed_packet', `It is ${server['packet']} bytes; a page needs at least ${MIN_PACKET_BYTES}.`)
  if (Number(server['token']) > 1)
    add(
      'note',
      'innodb_ft_min_token_size',
      `It is ${server['token']}: shorter words, such as Q, are found by code and title only.`,
    )
  return notes
}
