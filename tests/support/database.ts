/** A migrated database of its own for each test: in memory, or a real file where WAL and locks matter. */
import type { Kysely } from 'kysely'
import { openDatabase } from '#db/connection.ts'
import { migrateToLatest } from '#db/migrate.ts'
import type { Database } from '#db/schema.ts'

export async function freshDatabase(file = ':memory:'): Promise<Kysely<Database>> {
  const db = openDatabase(file)
  await migrateToLatest(db)
  return db
}
