/** Daily at 17:00 property time: tenants are told about tomorrow. A missed evening's tips are of no use and are not sent. */
import { forEachProperty } from '#lib/jobs/each-property.server.ts'
import { EVERY_QUARTER_HOUR, type Job } from '#lib/jobs/job.ts'
import { todayFrom } from '#lib/jobs/periods.ts'
import { sendTips } from '#lib/tip/send-tips.server.ts'

const AT_MIN = 17 * 60

export const tips: Job = {
  name: 'tips',
  cron: EVERY_QUARTER_HOUR,
  run: (worker) =>
    forEachProperty(worker, {
      name: 'tips',
      periods: todayFrom(AT_MIN),
      work: async (db, { property, nowMs }) => ({ ...(await sendTips(db, { propertyId: property.id, nowMs })) }),
    }),
}
