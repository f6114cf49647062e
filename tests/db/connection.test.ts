/** Two connections on one file, as the server and the worker have. */
import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import SQLite from 'better-sqlite3'
import { describe, expect, it } from 'vitest'
import { freshDatabase } from '../support/database.ts'

describe('openDatabase', () => {
  it('takes the write lock before reading, so a transaction never fails because another process wrote after its read', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'dwellhour-connection-'))
    const one = await freshDatabase(join(folder, 'two.sqlite'))
    const other = new SQLite(join(folder, 'two.sqlite'), { timeout: 20 })
    const insert = other.prepare("insert into signin_attempt (key, at_ms) values ('other', 1)")
    try {
      await one.transaction().execute(async (trx) => {
        await trx.selectFrom('signin_attempt').selectAll().execute()
        expect(() => insert.run()).toThrow(/locked/)
        await trx.insertInto('signin_attempt').values({ key: 'one', at_ms: 1 }).execute()
      })
      insert.run()
      const rows = await one.selectFrom('signin_attempt').select('key').execute()
      expect(rows.map((row) => row.key)).toEqual(['one', 'other'])
    } finally {
      await one.destroy()
      other.close()
      rmSync(folder, { recursive: true })
    }
  })
})
