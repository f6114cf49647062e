/** Runs a job of the whole server once a day, by the UTC clock; a missed night is made up at the next start. */
import type { JobCounts } from '#db/queries/job.ts'
import type { Worker } from './job.ts'
import { latestDay } from './periods.ts'
import { runOncePerPeriod } from './run-once.server.ts'

export interface ServerJob {
  readonly name: string
  readonly minuteOfDay: number
  readonly work: (nowMs: number) => Promise<JobCounts>
}

const LEASE_MS = 60 * 60_000

export async function eachNight(worker: Worker, { name, minuteOfDay, work }: ServerJob): Promise<JobCounts> {
  const nowMs = worker.now()
  const [day = ''] = latestDay(minuteOfDay)({ zone: 'UTC', createdAtMs: 0 }, nowMs, worker.mode)
  const outcome = await runOncePerPeriod(
    {
      db: worker.db,
      job: name,
      scope: 'server',
      period: worker.mode === 'again' ? `${day} again ${new Date(nowMs).toISOString()}` : day,
      organisationId: null,
      holder: worker.holder,
      nowMs,
      leaseMs: LEASE_MS,
    },
    () => work(nowMs),
  )
  return { done: Number(outcome === 'done'), failed: Number(outcome === 'failed') }
}
