/** Removes what has run out and nobody owns any more: across organisations, so it takes the connection itself. */
import type { Kysely } from 'kysely'
import type { Database } from '../schema.ts'

export interface CleanLimits {
  readonly nowMs: number
  /** Failed sign-ins older than this no longer count. */
  readonly attemptsBeforeMs: number
  /** Confirmation and reset letters older than this carry only dead links. */
  readonly accountMailBeforeMs: number
  readonly jobRunsBeforeMs: number
}

export async function removeExpired(
  db: Kysely<Database>,
  limits: CleanLimits,
): Promise<Record<'sessions' | 'tokens' | 'attempts' | 'letters' | 'runs', number>> {
  return db.transaction().execute(async (trx) => {
    const sessions = await trx.deleteFrom('session').where('expires_at_ms', '<=', limits.nowMs).executeTakeFirst()
    const tokens = await trx.deleteFrom('account_token').where('expires_at_ms', '<=', limits.nowMs).executeTakeFirst()
    const attempts = await trx.deleteFrom('signin_attempt').where('at_ms', '<', limits.attemptsBeforeMs).executeTakeFirst()
    const letters = await trx
      .deleteFrom('account_mail')
      .where('queued_at_ms', '<', limits.accountMailBeforeMs)
      .where('state', 'not in', ['queued', 'sending'])
      .executeTakeFirst()
    const runs = await trx.deleteFrom('job_run').where('started_at_ms', '<', limits.jobRunsBeforeMs).executeTakeFirst()
    return {
      sessions: Number(sessions.numDeletedRows),
      tokens: Number(tokens.numDeletedRows),
      attempts: Number(attempts.numDeletedRows),
      letters: Number(letters.numDeletedRows),
      runs: Number(runs.numDeletedRows),
    }
  })
}
