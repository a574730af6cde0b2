import { cpSync, mkdtempSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { migrate } from '../../../src-server/database/migrate'
import { grantRuntime } from '../../../src-server/database/grants'
import { openPool } from '../../../src-server/database/pool'
import { emptyDatabase, migratedDatabase, MIGRATIONS, type TestDatabase } from '../../support/database'

async function columnsOf({ root, name }: TestDatabase): Promise<unknown> {
  const [rows] = await root.query(
    `SELECT table_name, column_name, column_type, collation_name, is_nullable FROM information_schema.columns
      WHERE table_schema = ? ORDER BY table_name, ordinal_position`,
    [name],
  )
  return rows
}

describe('migration', () => {
  it('may be started five times at once', async () => {
    const together = await emptyDatabase()
    const said: string[] = []
    await Promise.all(
      Array.from({ length: 5 }, () =>
        migrate({ url: together.url, folder: MIGRATIONS, log: (words) => said.push(words) }),
      ),
    )
    expect(said.filter((words) => words.startsWith('Applied 0001'))).toHaveLength(1)
    expect(await columnsOf(together)).toEqual(await columnsOf(await migratedDatabase()))
  }, 60_000)

  it('finishes what a killed one began', async () => {
    const database = await emptyDatabase()
    const folder = mkdtempSync(join(tmpdir(), 'poleshelf-migrations-'))
    cpSync(MIGRATIONS, folder, { recursive: true })
    writeFileSync(
      join(folder, '9999_broken.sql'),
      'CREATE TABLE IF NOT EXISTS half (id INT PRIMARY KEY);\n--> statement-breakpoint\nNONSENSE;',
    )
    await expect(migrate({ url: database.url, folder })).rejects.toThrow()
    writeFileSync(join(folder, '9999_broken.sql'), 'CREATE TABLE IF NOT EXISTS half (id INT PRIMARY KEY);')
    await migrate({ url: database.url, folder })
    const [rows] = await database.root.query('SELECT holder FROM migration_lease')
    expect(rows).toEqual([{ holder: null }])
  }, 60_000)

  it('waits out the lease of a node that died, and takes it over', async () => {
    const database = await migratedDatabase()
    await database.root.query("UPDATE migration_lease SET holder = 'dead', until = NOW(3) + INTERVAL 1 SECOND")
    const startedMs = Date.now()
    await migrate({ url: database.url, folder: MIGRATIONS })
    expect(Date.now() - startedMs).toBeGreaterThan(700)
  }, 60_000)

  it('refuses a file that was changed after it had been applied', async () => {
    const database = await migratedDatabase()
    await database.root.query("UPDATE migrations SET file_hash = REPEAT('0', 64)")
    await expect(migrate({ url: database.url, folder: MIGRATIONS })).rejects.toThrow('was changed')
  }, 60_000)
})

describe('the serving account', () => {
  it('may serve, and can change neither revisions nor sizings nor tables', async () => {
    const database = await migratedDatabase()
    const runtime = new URL(database.url)
    runtime.username = `run_${database.name.slice(-8)}`
    runtime.password = 'a password of its own'
    await grantRuntime(database.url, runtime.href)
    await grantRuntime(database.url, runtime.href)
    const pool = openPool({ url: runtime.href, connections: 1 })
    const codeOf = (sql: string) =>
      pool.query(sql).then(
        () => 'allowed',
        (error: { code: string }) => error.code,
      )
    try {
      expect(await codeOf("SELECT value FROM counters WHERE name = 'S' FOR UPDATE")).toBe('allowed')
      expect(await codeOf('SELECT id FROM revisions WHERE block_id = 1 FOR UPDATE')).toBe('allowed')
      expect(await codeOf("UPDATE revisions SET status = 'returned' WHERE id = 0")).toBe('allowed')
      expect(await codeOf("UPDATE revisions SET source = 'x' WHERE id = 0")).toBe('ER_COLUMNACCESS_DENIED_ERROR')
      expect(await codeOf('DELETE FROM revisions')).toBe('ER_TABLEACCESS_DENIED_ERROR')
      expect(await codeOf("UPDATE sizings SET note = 'x'")).toBe('ER_TABLEACCESS_DENIED_ERROR')
      expect(await codeOf('DELETE FROM sizings')).toBe('ER_TABLEACCESS_DENIED_ERROR')
      expect(await codeOf('DROP TABLE people')).toBe('ER_TABLEACCESS_DENIED_ERROR')
      expect(await codeOf('CREATE TABLE x (id INT)')).toBe('ER_TABLEACCESS_DENIED_ERROR')
    } finally {
      await pool.close()
      await database.root.query(`DROP USER IF EXISTS '${runtime.username}'@'%'`)
    }
  }, 60_000)
})

describe('the tables hold the rules themselves', () => {
  it('refuse a second approved revision, an approval of one’s own, an unknown status, an orphan, a double number', async () => {
    const { root } = await migratedDatabase()
    const codeOf = (sql: string) =>
      root.query(sql).then(
        () => 'taken',
        (error: { errno: number }) => error.errno,
      )
    for (const [id, role] of [
      [1, 'editor'],
      [2, 'lead'],
    ])
      await root.query(
        `INSERT INTO people VALUES (${id}, '${role}@poleshelf.example', 'N', '${role}', 'x', NULL, NOW())`,
      )
    await root.query("INSERT INTO blocks (id, code, created_at) VALUES (1, 'lp1-inv', NOW())")
    const revision = (number: number, status: string, approver: string, block = 1) =>
      `INSERT INTO revisions (block_id, number, format, title, \`function\`, topology, \`order\`, tags, aliases, owner, summary,
         source, source_hash, author_id, author_name, change_note, status, submitted_at, approved_by_id, approved_by_name,
         approved_by_role, approved_at, self_check, engine_version, sketch_db, search_title, search_words, search_notes, search_parts)
       VALUES (${block}, ${number}, 1, 'T', 'low-pass', 'inverting', 1, '[]', '[]', 'O', 'S', 'x', 'h', 1, 'N', '', ${status},
         NOW(), ${approver}, '{}', '1', '[]', 't', 'w', 'n', 'p')`
    const LEAD = "2, 'N', 'lead', NOW()"
    const NOBODY = 'NULL, NULL, NULL, NULL'
    expect(await codeOf(revision(1, "'approved'", LEAD))).toBe('taken')
    expect(await codeOf(revision(2, "'approved'", LEAD))).toBe(1062)
    expect(await codeOf(revision(2, "'superseded'", LEAD))).toBe('taken')
    expect(await codeOf(revision(2, "'in review'", NOBODY))).toBe(1062)
    expect(await codeOf(revision(3, "'approved'", NOBODY, 1))).toBe(4025)
    expect(await codeOf(revision(4, "'superseded'", "1, 'N', 'lead', NOW()"))).toBe(4025)
    expect(await codeOf(revision(4, "'published'", NOBODY))).toBe(1265)
    expect(await codeOf(revision(4, "'in review'", NOBODY, 99))).toBe(1452)
    expect(await codeOf("INSERT INTO blocks (code, created_at) VALUES ('LP1-INV', NOW())")).toBe(1062)
  }, 60_000)
})
