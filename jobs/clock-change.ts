/** From ten days before a property's clock change, at 09:00 property time: its landlords are told once which time switches to set. */
import { sendClockNotice } from '#lib/clock-round/send-notice.server.ts'
import { forEachProperty } from '#lib/jobs/each-property.server.ts'
import { EVERY_QUARTER_HOUR, type Job } from '#lib/jobs/job.ts'
import { beforeClockChange } from '#lib/jobs/periods.ts'

const DAYS_BEFORE = 10
const AT_MIN = 9 * 60

export const clockChange: Job = {
  name: 'clock-change',
  cron: EVERY_QUARTER_HOUR,
  run: (worker) =>
    forEachProperty(worker, {
      name: 'clock-change',
      periods: beforeClockChange(DAYS_BEFORE, AT_MIN),
      work: async (db, { property, nowMs }) => ({ ...(await sendClockNotice(db, { propertyId: property.id, nowMs })) }),
    }),
}
