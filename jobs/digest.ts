/** On the 1st at 07:00 property time: the owners' digest of the month that has ended; missed ones are made up. */
import { writeDigest } from '#lib/digest/write-digest.server.ts'
import { forEachProperty } from '#lib/jobs/each-property.server.ts'
import { EVERY_QUARTER_HOUR, type Job } from '#lib/jobs/job.ts'
import { pastMonths } from '#lib/jobs/periods.ts'

const AT_MIN = 7 * 60

export const digest: Job = {
  name: 'digest',
  cron: EVERY_QUARTER_HOUR,
  run: (worker) =>
    forEachProperty(worker, {
      name: 'digest',
      periods: pastMonths(AT_MIN),
      work: async (db, { property, period, nowMs }) => ({ ...(await writeDigest(db, { propertyId: property.id, month: period, nowMs })) }),
    }),
}
