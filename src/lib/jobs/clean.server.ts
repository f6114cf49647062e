/** Removes what has been kept for as long as it may: see `retention.ts`. Sessions and one-use tokens go when they expire. */
import type { Kysely } from 'kysely'
import { removeExpired } from '#db/queries/clean.ts'
import type { JobCounts } from '#db/queries/job.ts'
import type { Database } from '#db/schema.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { RETENTION_DAYS } from './retention.ts'

const DAY_MS = 86_400_000

export function cleanUp(db: Kysely<Database>, nowMs: number): Promise<JobCounts> {
  const before = (kept: keyof typeof RETENTION_DAYS): number => nowMs - RETENTION_DAYS[kept] * DAY_MS
  // A civil day at a property differs from UTC's by one at most, which a span of weeks does not notice.
  const dayBefore = (kept: keyof typeof RETENTION_DAYS): string => civilOf(before(kept), 'UTC').day
  return removeExpired(db, {
    nowMs,
    attemptsBeforeMs: before('signInAttempts'),
    accountLettersBeforeMs: before('accountLetters'),
    letterBodiesBeforeMs: before('letterBodies'),
    lettersBeforeMs: before('letters'),
    jobRunsBeforeMs: before('jobRuns'),
    leasesBeforeMs: before('finishedLeases'),
    showerWeeksBeforeMs: before('showerWeeks'),
    showerWeeksEndedBefore: dayBefore('showerWeeks'),
    feedbackEndedBefore: dayBefore('feedback'),
    invitationsBeforeMs: before('closedInvitations'),
    evaluationsBefore: dayBefore('evaluations'),
  })
}
