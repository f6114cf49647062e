/** The server process's one connection, opened at first use. */
import type { Kysely } from 'kysely'
import { openDatabase } from '#db/connection.ts'
import type { Database } from '#db/schema.ts'
import { processConfig } from './config.server.ts'

let connection: Kysely<Database> | null = null

export function database(): Kysely<Database> {
  connection ??= openDatabase(processConfig().databaseFile)
  return connection
}
