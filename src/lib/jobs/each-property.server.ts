/** Runs a job for each property of each organisation, every due period once. One organisation's failure does not stop the rest. */
import type { OrgDb } from '#db/org-db.ts'
import { addFailedRun, type JobCounts, listScheduledProperties, type ScheduledProperty } from '#db/queries/job.ts'
import { organisationsForJob } from '#lib/auth/scope.server.ts'
import { log, loggedError } from '#lib/log.server.ts'
import type { Worker } from './job.ts'
import type { Periods } from './periods.ts'
import { failureOf, runOncePerPeriod } from './run-once.server.ts'

export interface PropertyJob {
  readonly name: string
  readonly periods: Periods
  readonly work: (
    db: OrgDb,
    of: { readonly property: ScheduledProperty; readonly period: string; readonly nowMs: number },
  ) => Promise<JobCounts>
}

/** The largest building takes minutes; a worker of this host that died is not waited for (see `holderIsGone`). */
const LEASE_MS = 60 * 60_000

export interface PeriodTotals extends JobCounts {
  readonly done: number
  readonly failed: number
  /** Already done, or held by another worker. */
  readonly left: number
}

export async function forEachProperty(worker: Worker, job: PropertyJob): Promise<PeriodTotals> {
  const totals = { done: 0, failed: 0, left: 0 }
  for (const { db: org } of await organisationsForJob(worker.db, job.name)) {
    try {
      for (const property of await listScheduledProperties(org)) {
        for (const period of job.periods(property, worker.now(), worker.mode)) {
          totals[await runOne({ worker, job, org, property, period })] += 1
        }
      }
    } catch (error) {
      totals.failed += 1
      const { organisationId } = org.scope
      const { errorId, sentence } = failureOf(error)
      log.error({ errorId, job: job.name, organisationId, err: loggedError(error) }, 'job could not go through an organisation')
      await addFailedRun(worker.db, { job: job.name, organisationId, atMs: worker.now(), error: sentence })
    }
  }
  return totals
}

interface One {
  readonly worker: Worker
  readonly job: PropertyJob
  readonly org: OrgDb
  readonly property: ScheduledProperty
  readonly period: string
}

async function runOne({ worker, job, org, property, period }: One): Promise<keyof PeriodTotals & ('done' | 'failed' | 'left')> {
  const nowMs = worker.now()
  const outcome = await runOncePerPeriod(
    {
      db: worker.db,
      job: job.name,
      scope: property.id,
      period: worker.mode === 'again' ? `${period} again ${new Date(nowMs).toISOString()}` : period,
      organisationId: org.scope.organisationId,
      holder: worker.holder,
      nowMs,
      leaseMs: LEASE_MS,
    },
    () => job.work(org, { property, period, nowMs }),
  )
  return outcome === 'done' || outcome === 'failed' ? outcome : 'left'
}
