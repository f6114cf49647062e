/** A backup taken while others write is whole; a restore keeps what it replaces and refuses a database in use. */
import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, describe, expect, it } from 'vitest'
import { openDatabase } from '#db/connection.ts'
import { backupDatabase, restoreDatabase } from '#db/copy.ts'
import { freshDatabase } from '../support/database.ts'
import { makeOrganisation } from '../support/factories.ts'

const NOW_MS = Date.UTC(2026, 1, 3, 3, 20)
const folders: string[] = []
afterEach(() => {
  for (const folder of folders.splice(0)) rmSync(folder, { recursive: true })
})

async function bench() {
  const folder = mkdtempSync(join(tmpdir(), 'dwellhour-copy-'))
  folders.push(folder)
  const databaseFile = join(folder, 'dwellhour.sqlite')
  const db = await freshDatabase(databaseFile)
  await makeOrganisation(db, 'first')
  const backups = join(folder, 'backups')
  const backup = (nowMs = NOW_MS, keep = 14) => backupDatabase({ databaseFile, folder: backups, nowMs, keep })
  return { db, databaseFile, folder, backups, backup }
}
async function slugs(file: string): Promise<string[]> {
  const db = openDatabase(file)
  const rows = await db.selectFrom('organisation').select('slug').orderBy('slug').execute()
  await db.destroy()
  return rows.map((row) => row.slug)
}

describe('backupDatabase', () => {
  it('copies what is committed, also what is still in the write-ahead log, while the database is open', async () => {
    const { db, backup } = await bench()
    await makeOrganisation(db, 'second')
    const { file } = await backup()
    await makeOrganisation(db, 'third')
    expect(file).toMatch(/dwellhour-20260203T032000Z\.sqlite$/)
    expect(await slugs(file)).toEqual(['first', 'second'])
    await db.destroy()
  })

  it('keeps the newest and touches no file that is not a backup', async () => {
    const { db, backup, backups } = await bench()
    for (let night = 0; night < 4; night++) await backup(NOW_MS + night * 86_400_000, 3)
    writeFileSync(join(backups, 'notes.txt'), 'mine')
    expect(await backup(NOW_MS + 4 * 86_400_000, 3)).toMatchObject({ removed: 1 })
    expect(readdirSync(backups).sort()).toEqual([
      'dwellhour-20260205T032000Z.sqlite',
      'dwellhour-20260206T032000Z.sqlite',
      'dwellhour-20260207T032000Z.sqlite',
      'notes.txt',
    ])
    await db.destroy()
  })
})

describe('restoreDatabase', () => {
  it('brings back the backup and keeps what was there beside it', async () => {
    const { db, databaseFile, backup } = await bench()
    const { file } = await backup()
    await makeOrganisation(db, 'second')
    await db.destroy()
    const outcome = restoreDatabase({ databaseFile, backupFile: file, nowMs: NOW_MS })
    expect(outcome.status).toBe('restored')
    expect(await slugs(databaseFile)).toEqual(['first'])
    expect(outcome.status === 'restored' && outcome.keptAside && (await slugs(outcome.keptAside))).toEqual(['first', 'second'])
  })

  it('refuses, changing nothing, while the database is open elsewhere', async () => {
    const { db, databaseFile, backup } = await bench()
    const { file } = await backup()
    await makeOrganisation(db, 'second')
    expect(restoreDatabase({ databaseFile, backupFile: file, nowMs: NOW_MS })).toMatchObject({
      status: 'refused',
      reason: expect.stringContaining('in use'),
    })
    await db.destroy()
    expect(await slugs(databaseFile)).toEqual(['first', 'second'])
  })

  it('refuses a file that is missing, that is no database, or that is somebody else’s', async () => {
    const { db, databaseFile, folder } = await bench()
    await db.destroy()
    writeFileSync(join(folder, 'text.sqlite'), 'not a database at all, only words that are long enough to be read as a page')
    await openDatabase(join(folder, 'other.sqlite')).destroy()
    for (const name of ['missing.sqlite', 'text.sqlite', 'other.sqlite'])
      expect(restoreDatabase({ databaseFile, backupFile: join(folder, name), nowMs: NOW_MS }).status).toBe('refused')
    expect(await slugs(databaseFile)).toEqual(['first'])
  })
})
