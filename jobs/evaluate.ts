/** Nightly at 01:30 property time: every unit of every property is evaluated for the days ahead. */
import { evaluateProperty } from '#lib/evaluation/evaluate-property.server.ts'
import { forEachProperty } from '#lib/jobs/each-property.server.ts'
import { EVERY_QUARTER_HOUR, type Job } from '#lib/jobs/job.ts'
import { latestDay } from '#lib/jobs/periods.ts'

const AT_MIN = 1 * 60 + 30

export const evaluate: Job = {
  name: 'evaluate',
  cron: EVERY_QUARTER_HOUR,
  run: (worker) =>
    forEachProperty(worker, {
      name: 'evaluate',
      periods: latestDay(AT_MIN),
      work: async (db, { property, nowMs }) => ({ ...(await evaluateProperty(db, { propertyId: property.id, nowMs })) }),
    }),
}
