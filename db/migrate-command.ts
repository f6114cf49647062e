/** `npm run db:migrate`: brings the database to the newest schema; the server's start does the same. */
import { command } from './command.ts'
import { openDatabase } from './connection.ts'
import { migrateToLatest } from './migrate.ts'

await command(async ({ databaseFile }) => {
  const db = openDatabase(databaseFile)
  try {
    const names = await migrateToLatest(db)
    if (names.length > 0) console.log(`Database brought up to date: ${names.join(', ')}.`)
  } finally {
    await db.destroy()
  }
})
