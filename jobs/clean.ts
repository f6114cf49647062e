/** Nightly at 03:10 UTC: what has run out is removed. */
import { cleanUp } from '#lib/jobs/clean.server.ts'
import { eachNight } from '#lib/jobs/each-night.server.ts'
import { EVERY_QUARTER_HOUR, type Job } from '#lib/jobs/job.ts'

const AT_MIN = 3 * 60 + 10

export const clean: Job = {
  name: 'clean',
  cron: EVERY_QUARTER_HOUR,
  run: (worker) => eachNight(worker, { name: 'clean', minuteOfDay: AT_MIN, work: (nowMs) => cleanUp(worker.db, nowMs) }),
}
