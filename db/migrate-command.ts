/** `npm run db:migrate`: makes the data folder and brings its database to the newest schema. */
import { mkdirSync } from 'node:fs'
import { processConfig } from '#lib/config.server.ts'
import { openDatabase } from './connection.ts'
import { migrateToLatest } from './migrate.ts'

const { dataDir, databaseFile } = processConfig()
mkdirSync(dataDir, { recursive: true })
const db = openDatabase(databaseFile)
try {
  const ran = await migrateToLatest(db)
  process.stdout.write(ran.length === 0 ? 'The database is up to date.\n' : `Migrated: ${ran.join(', ')}.\n`)
} finally {
  await db.destroy()
}
