/** Nightly at 03:20 UTC: a copy of the database; the newest fourteen are kept. */
import { join } from 'node:path'
import { backupDatabase } from '#db/copy.ts'
import { eachNight } from '#lib/jobs/each-night.server.ts'
import { EVERY_QUARTER_HOUR, type Job } from '#lib/jobs/job.ts'

const AT_MIN = 3 * 60 + 20
const KEEP = 14

export const backup: Job = {
  name: 'backup',
  cron: EVERY_QUARTER_HOUR,
  run: (worker) =>
    eachNight(worker, {
      name: 'backup',
      minuteOfDay: AT_MIN,
      work: async (nowMs) => {
        const { databaseFile, dataDir } = worker.config
        const { removed } = await backupDatabase({ databaseFile, folder: join(dataDir, 'backups'), nowMs, keep: KEEP })
        return { written: 1, removed }
      },
    }),
}
