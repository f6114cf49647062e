/** Copies of the whole database: SQLite's own online backup, safe while server and worker write, and putting one back. */
import { copyFileSync, existsSync, mkdirSync, readdirSync, renameSync, rmSync } from 'node:fs'
import { basename, dirname, join } from 'node:path'
import SQLite from 'better-sqlite3'

const NAME = /^dwellhour-\d{8}T\d{6}Z\.sqlite$/

const stamp = (nowMs: number): string => new Date(nowMs).toISOString().replaceAll(/[-:]|\.\d+/g, '')

export interface BackupOptions {
  readonly databaseFile: string
  readonly folder: string
  readonly nowMs: number
  /** Older backups of ours beyond this many are removed. */
  readonly keep: number
}
export interface Backup {
  readonly file: string
  readonly removed: number
}

/** Writes `dwellhour-<time>.sqlite`, checked, or nothing: an unfinished copy never has that name. */
export async function backupDatabase({ databaseFile, folder, nowMs, keep }: BackupOptions): Promise<Backup> {
  mkdirSync(folder, { recursive: true, mode: 0o700 })
  const file = join(folder, `dwellhour-${stamp(nowMs)}.sqlite`)
  const unfinished = `${file}.unfinished`
  rmSync(unfinished, { force: true })
  const source = new SQLite(databaseFile, { readonly: true, fileMustExist: true })
  try {
    await source.backup(unfinished)
  } finally {
    source.close()
  }
  const problem = problemOf(unfinished)
  if (problem) {
    rmSync(unfinished)
    throw new Error(`The copy is not sound (${problem}); it was removed.`)
  }
  renameSync(unfinished, file)
  const old = readdirSync(folder)
    .filter((name) => NAME.test(name))
    .sort()
    .slice(0, -keep)
  for (const name of old) rmSync(join(folder, name))
  return { file, removed: old.length }
}

export type RestoreOutcome =
  { readonly status: 'restored'; readonly keptAside: string | null } | { readonly status: 'refused'; readonly reason: string }

/** Puts a backup in the database's place; the replaced file is kept beside it. Refuses while any process has the database open. */
export function restoreDatabase(options: {
  readonly databaseFile: string
  readonly backupFile: string
  readonly nowMs: number
}): RestoreOutcome {
  const { databaseFile, backupFile, nowMs } = options
  if (!existsSync(backupFile)) return { status: 'refused', reason: `There is no file ${backupFile}.` }
  mkdirSync(dirname(databaseFile), { recursive: true, mode: 0o700 })
  const incoming = `${databaseFile}.incoming`
  copyFileSync(backupFile, incoming)
  const problem = problemOf(incoming)
  if (problem) {
    rmSync(incoming)
    return { status: 'refused', reason: `${basename(backupFile)} is not a sound backup: ${problem}. Nothing was changed.` }
  }
  const exists = existsSync(databaseFile)
  if (exists && !closeJournal(databaseFile)) {
    rmSync(incoming)
    return { status: 'refused', reason: 'The database is in use. Stop the server and the worker, then restore again. Nothing was changed.' }
  }
  const keptAside = exists ? `${databaseFile}.before-restore-${stamp(nowMs)}` : null
  if (keptAside) renameSync(databaseFile, keptAside)
  renameSync(incoming, databaseFile)
  return { status: 'restored', keptAside }
}

/**
 * Folds the write-ahead log into the file. SQLite leaves WAL mode only when no other connection is open
 * (https://sqlite.org/wal.html, "Persistence of WAL mode"), so this is also the test for a running process.
 */
function closeJournal(databaseFile: string): boolean {
  const sqlite = new SQLite(databaseFile, { timeout: 200 })
  try {
    return sqlite.pragma('journal_mode = DELETE', { simple: true }) === 'delete'
  } catch (error) {
    if (error instanceof SQLite.SqliteError && error.code.startsWith('SQLITE_BUSY')) return false
    throw error
  } finally {
    sqlite.close()
  }
}

/** What is wrong with a copy of ours, or `null`. It leaves WAL mode, so that the copy is one file with nothing beside it. */
function problemOf(copy: string): string | null {
  const sqlite = new SQLite(copy, { fileMustExist: true })
  try {
    sqlite.pragma('journal_mode = DELETE')
    const check = String(sqlite.pragma('quick_check', { simple: true }))
    if (check !== 'ok') return check
    const tables = sqlite.prepare("select count(*) as count from sqlite_schema where name in ('kysely_migration', 'organisation')")
    return (tables.get() as { count: number }).count === 2 ? null : 'it holds no database of this product'
  } catch (error) {
    return error instanceof Error ? error.message : String(error)
  } finally {
    sqlite.close()
  }
}
