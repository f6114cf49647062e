/** Daily at 07:30 property time: landlords are told which flags are open, when that has changed. A missed morning is told by the next. */
import { sendFlagSummary } from '#lib/flag/send-flag-summary.server.ts'
import { forEachProperty } from '#lib/jobs/each-property.server.ts'
import { EVERY_QUARTER_HOUR, type Job } from '#lib/jobs/job.ts'
import { todayFrom } from '#lib/jobs/periods.ts'

const AT_MIN = 7 * 60 + 30

export const flagSummary: Job = {
  name: 'flag-summary',
  cron: EVERY_QUARTER_HOUR,
  run: (worker) =>
    forEachProperty(worker, {
      name: 'flag-summary',
      periods: todayFrom(AT_MIN),
      work: async (db, { property, period, nowMs }) => ({
        ...(await sendFlagSummary(db, { propertyId: property.id, day: period, nowMs })),
      }),
    }),
}
