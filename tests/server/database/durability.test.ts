import { expect, it } from 'vitest'
import { notesOf } from '../../../src-server/database/durability'

const SOUND = {
  flush: 1,
  doublewrite: 'ON',
  binlog: 0,
  syncBinlog: 0,
  charset: 'utf8mb4',
  sqlMode: 'STRICT_TRANS_TABLES',
  packet: 16_777_216,
  ownMode: 'STRICT_ALL_TABLES,NO_ZERO_DATE',
  zone: '+00:00',
  token: 1,
}

it('notes nothing about a server that keeps every promise', () => {
  expect(notesOf(SOUND)).toEqual([])
})

// Sources: MariaDB knowledge base, innodb_flush_log_at_trx_commit, innodb_doublewrite, sync_binlog, max_allowed_packet.
it.each([
  [{ flush: 2 }, 'innodb_flush_log_at_trx_commit', 'warning'],
  [{ doublewrite: 'OFF' }, 'innodb_doublewrite', 'warning'],
  [{ binlog: 1 }, 'sync_binlog', 'warning'],
  [{ charset: 'latin1' }, 'character_set_server', 'note'],
  [{ sqlMode: '' }, 'sql_mode', 'note'],
  [{ packet: 1_048_576 }, 'max_allowed_packet', 'refused'],
  [{ zone: 'SYSTEM' }, 'session settings', 'refused'],
  [{ token: 3 }, 'innodb_ft_min_token_size', 'note'],
])('names %o', (change, setting, level) => {
  expect(notesOf({ ...SOUND, ...change })).toMatchObject([{ setting, level }])
})
