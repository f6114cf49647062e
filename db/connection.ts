/** Opens the SQLite file and returns Kysely over it; the caller owns closing it with `destroy()`. */
import SQLite from 'better-sqlite3'
import { CompiledQuery, type DatabaseConnection, Kysely, SqliteDialect, SqliteDriver } from 'kysely'
import type { Database } from './schema.ts'

const BUSY_TIMEOUT_MS = 5_000

/**
 * A deferred transaction that has read and then writes fails at once when another process wrote in between, and the busy
 * timeout does not apply (https://sqlite.org/lang_transaction.html). Server and worker share the file, so ours ask for the write lock first.
 */
class ImmediateDriver extends SqliteDriver {
  override async beginTransaction(connection: DatabaseConnection): Promise<void> {
    await connection.executeQuery(CompiledQuery.raw('begin immediate'))
  }
}

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
  const dialect = new SqliteDialect({ database: sqlite })
  dialect.createDriver = () => new ImmediateDriver({ database: sqlite })
  return new Kysely<Database>({ dialect })
}
