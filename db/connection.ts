/** Opens the SQLite file and returns Kysely over it; the caller owns closing it with `destroy()`. */
import SQLite from 'better-sqlite3'
import { Kysely, SqliteDialect } from 'kysely'
import type { Database } from './schema.ts'

const BUSY_TIMEOUT_MS = 5_000

/**
 * `file` is a path or `:memory:`. WAL lets the worker write while the server reads; `synchronous=full` because a message
 * marked as sent must still be marked after a power cut.
 */
export function openDatabase(file: string): Kysely<Database> {
  const sqlite = new SQLite(file)
  sqlite.pragma('journal_mode = WAL')
  sqlite.pragma('synchronous = FULL')
  sqlite.pragma('foreign_keys = ON')
  sqlite.pragma(`busy_timeout = ${BUSY_TIMEOUT_MS}`)
  return new Kysely<Database>({ dialect: new SqliteDialect({ database: sqlite }) })
}
