/** Brings a database to the newest schema: all pending migrations in one transaction, or none. */
import { type Kysely, Migrator } from 'kysely'
import { MIGRATIONS } from './migrations/index.ts'
import type { Database } from './schema.ts'

/** Returns the names of the migrations that ran. Throws what the failed migration threw; the file is then unchanged. */
export async function migrateToLatest(db: Kysely<Database>): Promise<readonly string[]> {
  const migrator = new Migrator({ db, provider: { getMigrations: () => Promise.resolve({ ...MIGRATIONS }) } })
  const { error, results } = await migrator.migrateToLatest()
  if (error) throw error
  return (results ?? []).map((result) => result.migrationName)
}
