/**
 * Runs a period of a job exactly once, however many workers try: whoever takes the lease runs it, and a finished period is
 * never run again. A failed period is tried again after a pause that grows; a killed worker's period is taken over.
 */
import { randomUUID } from 'node:crypto'
import type { Kysely } from 'kysely'
import type { OrganisationId } from '#db/ids.ts'
import {
  changeLease,
  closeAbandonedRuns,
  findLease,
  finishJobRun,
  type JobCounts,
  type JobPeriod,
  startJobRun,
  takeLease,
} from '#db/queries/job.ts'
import type { Database } from '#db/schema.ts'
import { AppError } from '#lib/http/app-error.ts'
import { log, loggedError } from '#lib/log.server.ts'
import { holderIsGone } from './holder.server.ts'

export interface PeriodToRun extends JobPeriod {
  readonly db: Kysely<Database>
  readonly organisationId: OrganisationId | null
  readonly holder: string
  readonly nowMs: number
  /** Longer than the work can take: another worker may take over after it. */
  readonly leaseMs: number
}
export type PeriodOutcome = 'done' | 'already-done' | 'held-elsewhere' | 'failed'

const FIRST_PAUSE_MS = 15 * 60_000
const LONGEST_PAUSE_MS = 6 * 3_600_000
/** Holder of a failed period until its pause is over. */
const NOBODY = ''

export async function runOncePerPeriod(given: PeriodToRun, work: () => Promise<JobCounts>): Promise<PeriodOutcome> {
  const { db, job, scope, period, holder, organisationId, nowMs } = given
  const taken = await take(given)
  if (typeof taken === 'string') return taken
  const startedAtMs = performance.now()
  const finishedAtMs = () => nowMs + Math.round(performance.now() - startedAtMs)
  const of = { job, scope, period, heldBy: holder }
  try {
    const counts = await work()
    await db.transaction().execute(async (trx) => {
      await changeLease(trx, of, { doneAtMs: finishedAtMs() })
      await finishJobRun(trx, taken.runId, { finishedAtMs: finishedAtMs(), counts, error: null })
    })
    log.info({ job, scope, period, organisationId, counts }, 'job done')
    return 'done'
  } catch (error) {
    const pauseMs = Math.min(LONGEST_PAUSE_MS, FIRST_PAUSE_MS * 2 ** (taken.attempts - 1))
    const { errorId, sentence } = failureOf(error)
    await db.transaction().execute(async (trx) => {
      await changeLease(trx, of, { holder: NOBODY, leaseUntilMs: finishedAtMs() + pauseMs })
      await finishJobRun(trx, taken.runId, { finishedAtMs: finishedAtMs(), counts: null, error: sentence })
    })
    log.error({ errorId, job, scope, period, organisationId, err: loggedError(error) }, 'job failed')
    return 'failed'
  }
}

/** What people read of a failure: words meant for them, or a sentence and the id under which the rest stands in the log. */
export function failureOf(error: unknown): { readonly errorId: string; readonly sentence: string } {
  const errorId = randomUUID().slice(0, 8)
  const sentence =
    error instanceof AppError ? error.message : `It failed for a reason that nobody expected. Its id in the server’s log is ${errorId}.`
  return { errorId, sentence }
}

type Taken = { readonly runId: string; readonly attempts: number } | 'already-done' | 'held-elsewhere'

const take = (given: PeriodToRun): Promise<Taken> =>
  given.db.transaction().execute(async (trx) => {
    const { organisationId, holder, nowMs, leaseMs } = given
    const lease = await findLease(trx, given)
    if (lease && lease.doneAtMs !== null) return 'already-done'
    if (lease && lease.leaseUntilMs > nowMs && !holderIsGone(lease.holder)) return 'held-elsewhere'
    await takeLease(trx, given, { organisationId, holder, leaseUntilMs: nowMs + leaseMs })
    await closeAbandonedRuns(trx, given, { nowMs, error: 'The worker ended before the job did; it was run again.' })
    const runId = await startJobRun(trx, given, { organisationId, startedAtMs: nowMs })
    return { runId, attempts: (lease?.attempts ?? 0) + 1 }
  })
