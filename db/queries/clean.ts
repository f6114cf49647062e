/** Removes what has run out: across organisations, so it takes the connection itself. Every delete that reaches into another table compares the organisation too. */
import { type Kysely, sql, type Transaction } from 'kysely'
import type { Database } from '../schema.ts'

/** Moments in milliseconds, or local days; what is older goes. */
export interface CleanLimits {
  readonly nowMs: number
  readonly attemptsBeforeMs: number
  readonly accountLettersBeforeMs: number
  readonly letterBodiesBeforeMs: number
  readonly lettersBeforeMs: number
  readonly jobRunsBeforeMs: number
  readonly leasesBeforeMs: number
  readonly showerWeeksBeforeMs: number
  readonly showerWeeksEndedBefore: string
  readonly feedbackEndedBefore: string
  readonly invitationsBeforeMs: number
  readonly evaluationsBefore: string
}
type Removed = Record<
  | 'sessions'
  | 'tokens'
  | 'attempts'
  | 'accountLetters'
  | 'letterBodies'
  | 'letters'
  | 'runs'
  | 'leases'
  | 'showerWeeks'
  | 'feedback'
  | 'invitations'
  | 'evaluations',
  number
>

/** Still to be sent, or being sent. */
const OPEN = ['queued', 'sending'] as const

export async function removeExpired(db: Kysely<Database>, limits: CleanLimits): Promise<Removed> {
  return db.transaction().execute(async (trx) => {
    const { nowMs } = limits
    const removed = async (query: { executeTakeFirst(): Promise<{ readonly numDeletedRows: bigint }> }) =>
      Number((await query.executeTakeFirst()).numDeletedRows)
    return {
      sessions: await removed(trx.deleteFrom('session').where('expires_at_ms', '<=', nowMs)),
      tokens: await removed(trx.deleteFrom('account_token').where('expires_at_ms', '<=', nowMs)),
      attempts: await removed(trx.deleteFrom('signin_attempt').where('at_ms', '<', limits.attemptsBeforeMs)),
      accountLetters: await removed(
        trx.deleteFrom('account_mail').where('queued_at_ms', '<', limits.accountLettersBeforeMs).where('state', 'not in', OPEN),
      ),
      letters: await removed(trx.deleteFrom('message').where('queued_at_ms', '<', limits.lettersBeforeMs).where('state', 'not in', OPEN)),
      letterBodies: await emptyBodies(trx, limits.letterBodiesBeforeMs),
      runs: await removed(trx.deleteFrom('job_run').where('started_at_ms', '<', limits.jobRunsBeforeMs)),
      leases: await removed(trx.deleteFrom('job_lease').where('done_at_ms', '<', limits.leasesBeforeMs)),
      showerWeeks: await removeShowerWeeks(trx, limits),
      feedback: await removeFeedback(trx, limits.feedbackEndedBefore),
      invitations: await removed(
        trx
          .deleteFrom('invitation')
          .where((eb) =>
            eb.or(
              ['accepted_at_ms', 'revoked_at_ms', 'expires_at_ms'].map((column) => eb(sql.ref(column), '<', limits.invitationsBeforeMs)),
            ),
          ),
      ),
      evaluations: await removeEvaluations(trx, limits.evaluationsBefore),
    }
  })
}

/** The row stays: that a letter was sent, to whom, and how it ended. */
async function emptyBodies(trx: Transaction<Database>, beforeMs: number): Promise<number> {
  const result = await trx
    .updateTable('message')
    .set({ text: '', html: '', headers: '{}', attachments: '[]', private_parts: '[]' })
    .where('queued_at_ms', '<', beforeMs)
    .where('state', 'not in', OPEN)
    .where('text', '<>', '')
    .executeTakeFirst()
  return Number(result.numUpdatedRows)
}

/** Weeks of tenancies that are over, and weeks that a newer one of the same tenancy replaced. */
async function removeShowerWeeks(
  trx: Transaction<Database>,
  { showerWeeksBeforeMs, showerWeeksEndedBefore }: CleanLimits,
): Promise<number> {
  const ended = await sql`delete from preference where exists (select 1 from tenancy
    where tenancy.organisation_id = preference.organisation_id and tenancy.id = preference.tenancy_id
      and tenancy.to_day < ${showerWeeksEndedBefore})`.execute(trx)
  const replaced = await sql`delete from preference where exists (select 1 from preference newer
    where newer.organisation_id = preference.organisation_id and newer.tenancy_id = preference.tenancy_id
      and newer.set_at_ms > preference.set_at_ms and newer.set_at_ms < ${showerWeeksBeforeMs})`.execute(trx)
  return Number(ended.numAffectedRows ?? 0) + Number(replaced.numAffectedRows ?? 0)
}

async function removeFeedback(trx: Transaction<Database>, endedBefore: string): Promise<number> {
  const result = await sql`delete from feedback where exists (select 1 from tenancy
    where tenancy.organisation_id = feedback.organisation_id and tenancy.id = feedback.tenancy_id
      and tenancy.to_day < ${endedBefore})`.execute(trx)
  return Number(result.numAffectedRows ?? 0)
}

/** With the expected runs and the agreed starts of the same days; measured runs are records of what was done. */
async function removeEvaluations(trx: Transaction<Database>, before: string): Promise<number> {
  await trx.deleteFrom('run').where('kind', '=', 'expected').where('day', '<', before).execute()
  await trx.deleteFrom('plan_start').where('day', '<', before).execute()
  const result = await trx.deleteFrom('evaluation').where('day', '<', before).executeTakeFirst()
  return Number(result.numDeletedRows)
}
