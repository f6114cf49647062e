/** Decides what has run out: dead sessions, tokens and sign-in counts, old account letters and job records. */
import type { Kysely } from 'kysely'
import { removeExpired } from '#db/queries/clean.ts'
import type { JobCounts } from '#db/queries/job.ts'
import type { Database } from '#db/schema.ts'

const DAY_MS = 86_400_000
/** Sign-in limits look back an hour at most; a week leaves room to look at an attack. */
const ATTEMPTS_DAYS = 7
const ACCOUNT_MAIL_DAYS = 30
/** A year and a month, so that the same night a year ago can be compared. */
const JOB_RUN_DAYS = 400

export const cleanUp = (db: Kysely<Database>, nowMs: number): Promise<JobCounts> =>
  removeExpired(db, {
    nowMs,
    attemptsBeforeMs: nowMs - ATTEMPTS_DAYS * DAY_MS,
    accountMailBeforeMs: nowMs - ACCOUNT_MAIL_DAYS * DAY_MS,
    jobRunsBeforeMs: nowMs - JOB_RUN_DAYS * DAY_MS,
  })
