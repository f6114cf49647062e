/** `npm run mail:bounces -- [file …]`: records the delivery status reports in these files, or one from standard input, as a mail system pipes it. */
import { readFile } from 'node:fs/promises'
import { buffer } from 'node:stream/consumers'
import { openDatabase } from '#db/connection.ts'
import { processConfig } from '#lib/config.server.ts'
import { recordDeliveryReport } from '#lib/mail/record-bounce.server.ts'

const SAID = {
  recorded: 'the bounce is recorded',
  'already-recorded': 'recorded already, or the letter never left',
  'no-such-letter': 'no letter of ours',
  'not-a-failure': 'no failure, nothing to record',
  'no-report': 'not a delivery status report',
} as const

async function main(): Promise<void> {
  const files = process.argv.slice(2)
  const db = openDatabase(processConfig().databaseFile)
  try {
    const reports = files.length > 0 ? files : ['standard input']
    for (const name of reports) {
      const source = files.length > 0 ? await readFile(name) : await buffer(process.stdin)
      const outcome = await recordDeliveryReport(db, { source, nowMs: Date.now() })
      console.log(`${name}: ${SAID[outcome]}`)
    }
  } finally {
    await db.destroy()
  }
}

await main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error)
  process.exitCode = 1
})
