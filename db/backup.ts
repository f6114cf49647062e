/** `npm run db:backup`: a copy of the running database in the data folder's `backups`. */
import { join } from 'node:path'
import { command } from './command.ts'
import { backupDatabase } from './copy.ts'

/** By hand nothing is removed: the nightly job keeps the folder short. */
const KEEP_ALL = Number.MAX_SAFE_INTEGER

await command(async ({ databaseFile, dataDir }) => {
  const { file } = await backupDatabase({ databaseFile, folder: join(dataDir, 'backups'), nowMs: Date.now(), keep: KEEP_ALL })
  console.log(`Backup written: ${file}`)
})
