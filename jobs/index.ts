/** `npm run jobs`: the worker with all schedules. `-- --once <name>` runs one job now and exits; `--again` even when it is done; `--at <instant>` as if it were then. */
import { openDatabase } from '#db/connection.ts'
import { processConfig } from '#lib/config.server.ts'
import { makeHolder } from '#lib/jobs/holder.server.ts'
import type { Worker } from '#lib/jobs/job.ts'
import { drain, startWorker } from '#lib/jobs/worker.server.ts'
import { readArguments } from '#lib/jobs/arguments.ts'
import { log } from '#lib/log.server.ts'
import { transportFor } from '#lib/mail/transport.server.ts'
import { backup } from './backup.ts'
import { clean } from './clean.ts'
import { clockChange } from './clock-change.ts'
import { digest } from './digest.ts'
import { evaluate } from './evaluate.ts'
import { flagSummary } from './flag-summary.ts'
import { mail } from './mail.ts'
import { tips } from './tips.ts'

const JOBS = [evaluate, tips, flagSummary, clockChange, digest, mail, clean, backup]
const STOP_PATIENCE_MS = 8_000

async function main(): Promise<void> {
  const asked = readArguments(
    process.argv.slice(2),
    JOBS.map((job) => job.name),
  )
  if (asked.status === 'invalid') throw new Error(asked.message)
  const config = processConfig()
  const db = openDatabase(config.databaseFile)
  const transport = transportFor(config)
  const { atMs, mode } = asked
  const now = atMs === null ? () => Date.now() : () => atMs
  const worker: Worker = { db, config, transport, holder: makeHolder(), mode, now }
  const close = async () => {
    transport.close()
    await db.destroy()
  }
  const once = JOBS.find((job) => job.name === asked.once)
  if (once) {
    const counts = await drain(once, worker)
    console.log(JSON.stringify({ job: once.name, ...counts }))
    await close()
    process.exitCode = (counts.failed ?? 0) > 0 && once !== mail ? 1 : 0
    return
  }
  const running = startWorker(JOBS, worker)
  log.info({ jobs: JOBS.map((job) => job.name) }, 'worker started')
  const stop = () =>
    void running
      .stop(STOP_PATIENCE_MS)
      .then(close)
      .then(() => process.exit(0))
  process.once('SIGTERM', stop)
  process.once('SIGINT', stop)
  // A start script that dies takes its worker with it.
  process.once('disconnect', stop)
}

await main().catch((error: unknown) => {
  console.error(error instanceof Error ? error.message : error)
  process.exitCode = 1
})
