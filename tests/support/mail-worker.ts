/** The mail worker alone, for tests that kill it often: the product's own delivery and SMTP, begun by a word on standard input so that its start can be had in advance. */
import { once } from 'node:events'
import { openDatabase } from '#db/connection.ts'
import { processConfig } from '#lib/config.server.ts'
import { makeHolder } from '#lib/jobs/holder.server.ts'
import { deliverMail } from '#lib/mail/deliver.server.ts'
import { transportFor } from '#lib/mail/transport.server.ts'

const LETTERS_A_ROUND = 200

const config = processConfig()
const db = openDatabase(config.databaseFile)
const transport = transportFor(config)
const holder = makeHolder()
process.stdout.write('ready\n')
await once(process.stdin, 'data')
for (;;) {
  const counts = await deliverMail({ db, transport, holder, now: () => Date.now(), limit: LETTERS_A_ROUND })
  if (Object.values(counts).every((count) => count === 0)) break
}
transport.close()
await db.destroy()
process.exit(0)
