/** `npm run db:restore -- <file>`: puts a backup in the database's place; refuses while the server runs. */
import { resolve } from 'node:path'
import { command } from './command.ts'
import { restoreDatabase } from './copy.ts'

await command(({ databaseFile }) => {
  const [file] = process.argv.slice(2)
  if (!file) throw new Error('Name the backup: npm run db:restore -- data/backups/<file>')
  const outcome = restoreDatabase({ databaseFile, backupFile: resolve(file), nowMs: Date.now() })
  if (outcome.status === 'refused') throw new Error(outcome.reason)
  console.log(`Restored.${outcome.keptAside ? ` What was there before is kept at ${outcome.keptAside}.` : ''} Start again with npm start.`)
})
