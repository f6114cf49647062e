/**
 * Leases and runs of jobs. A worker goes across organisations, so what it does takes the connection itself; the
 * properties of one organisation come through its scope.
 */
import type { Kysely, Transaction } from 'kysely'
import { newId, type OrganisationId, type PropertyId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb } from '../org-db.ts'
import type { Database } from '../schema.ts'
import type { JobRunTable } from '../tables/job-run.ts'

/** One period of one job in one scope (a property's id, or the whole server). */
export interface JobPeriod {
  readonly job: string
  readonly scope: string
  readonly period: string
}
export interface Lease {
  readonly holder: string
  readonly leaseUntilMs: number
  readonly attempts: number
  readonly doneAtMs: number | null
}
export type JobCounts = Readonly<Record<string, number>>

const ofPeriod = (trx: Kysely<Database>, { job, scope, period }: JobPeriod) =>
  trx.selectFrom('job_lease').where('job', '=', job).where('scope', '=', scope).where('period', '=', period)

export async function findLease(db: Kysely<Database>, of: JobPeriod): Promise<Lease | null> {
  const row = await ofPeriod(db, of).select(['holder', 'lease_until_ms', 'attempts', 'done_at_ms']).executeTakeFirst()
  return row ? { holder: row.holder, leaseUntilMs: row.lease_until_ms, attempts: row.attempts, doneAtMs: row.done_at_ms } : null
}

export interface LeaseTerms {
  readonly organisationId: OrganisationId | null
  readonly holder: string
  readonly leaseUntilMs: number
}

/** Takes the lease, whoever had it; the caller has looked in the same transaction. */
export async function takeLease(trx: Transaction<Database>, of: JobPeriod, terms: LeaseTerms): Promise<void> {
  await trx
    .insertInto('job_lease')
    .values({
      job: of.job,
      scope: of.scope,
      period: of.period,
      organisation_id: terms.organisationId,
      holder: terms.holder,
      lease_until_ms: terms.leaseUntilMs,
      attempts: 1,
      done_at_ms: null,
    })
    .onConflict((conflict) =>
      conflict.columns(['job', 'scope', 'period']).doUpdateSet((eb) => ({
        holder: terms.holder,
        lease_until_ms: terms.leaseUntilMs,
        attempts: eb('job_lease.attempts', '+', 1),
      })),
    )
    .execute()
}

/** Changes a lease only while `holder` has it; answers whether it did. */
export async function changeLease(
  db: Kysely<Database>,
  of: JobPeriod & { readonly heldBy: string },
  change: { readonly holder?: string; readonly leaseUntilMs?: number; readonly doneAtMs?: number },
): Promise<boolean> {
  const result = await db
    .updateTable('job_lease')
    .set({
      ...(change.holder === undefined ? {} : { holder: change.holder }),
      ...(change.leaseUntilMs === undefined ? {} : { lease_until_ms: change.leaseUntilMs }),
      ...(change.doneAtMs === undefined ? {} : { done_at_ms: change.doneAtMs }),
    })
    .where('job', '=', of.job)
    .where('scope', '=', of.scope)
    .where('period', '=', of.period)
    .where('holder', '=', of.heldBy)
    .executeTakeFirst()
  return Number(result.numUpdatedRows) > 0
}

export async function startJobRun(
  trx: Transaction<Database>,
  of: JobPeriod,
  start: { readonly organisationId: OrganisationId | null; readonly startedAtMs: number },
): Promise<string> {
  const id = newId<string>()
  const { job, scope, period } = of
  await trx
    .insertInto('job_run')
    .values({
      id,
      job,
      scope,
      period,
      organisation_id: start.organisationId,
      started_at_ms: start.startedAtMs,
      finished_at_ms: null,
      counts: null,
      error: null,
    })
    .execute()
  return id
}

export async function finishJobRun(
  db: Kysely<Database>,
  id: string,
  end: { readonly finishedAtMs: number; readonly counts: JobCounts | null; readonly error: string | null },
): Promise<void> {
  await db
    .updateTable('job_run')
    .set({ finished_at_ms: end.finishedAtMs, counts: end.counts ? toJson(end.counts) : null, error: end.error })
    .where('id', '=', id)
    .execute()
}

/** Ends the rows that a killed worker left open. */
export async function closeAbandonedRuns(
  trx: Transaction<Database>,
  of: JobPeriod,
  end: { readonly nowMs: number; readonly error: string },
) {
  await trx
    .updateTable('job_run')
    .set({ finished_at_ms: end.nowMs, error: end.error })
    .where('job', '=', of.job)
    .where('scope', '=', of.scope)
    .where('period', '=', of.period)
    .where('finished_at_ms', 'is', null)
    .execute()
}

export interface ScheduledProperty {
  readonly id: PropertyId
  readonly slug: string
  readonly zone: string
  readonly createdAtMs: number
}

export async function listScheduledProperties(db: OrgDb): Promise<readonly ScheduledProperty[]> {
  const rows = await db
    .selectFrom('property')
    .select(['property.id', 'property.slug', 'property.zone', 'property.created_at_ms'])
    .orderBy('property.id')
    .execute()
  return rows.map((row) => ({ id: row.id, slug: row.slug, zone: row.zone, createdAtMs: row.created_at_ms }))
}

export interface JobRun {
  readonly job: string
  /** Id of the property it ran for, of the organisation, or `server`. */
  readonly scope: string
  readonly period: string
  readonly startedAtMs: number
  readonly finishedAtMs: number | null
  readonly counts: JobCounts | null
  readonly error: string | null
}

/** One organisation's newest runs, newest first. The table also holds the server's own runs, which belong to nobody, so the owner is named here. */
export async function listJobRuns(db: Kysely<Database>, organisationId: OrganisationId, limit: number): Promise<readonly JobRun[]> {
  const rows = await db
    .selectFrom('job_run')
    .where('job_run.organisation_id', '=', organisationId)
    .select(RUN_COLUMNS)
    .orderBy('job_run.started_at_ms', 'desc')
    .limit(limit)
    .execute()
  return rows.map(toRun)
}

/** The last run of each job in each of its scopes: of one organisation, or with `null` those of the whole server. */
export async function listLastRuns(db: Kysely<Database>, organisationId: OrganisationId | null): Promise<readonly JobRun[]> {
  // Beside a lone max(), SQLite takes the other columns from the row that has it (https://sqlite.org/lang_select.html, 2.5).
  const rows = await db
    .selectFrom('job_run')
    .where('job_run.organisation_id', 'is', organisationId)
    .select(['job_run.job', 'job_run.scope', 'job_run.period', 'job_run.finished_at_ms', 'job_run.counts', 'job_run.error'])
    .select((eb) => eb.fn.max('job_run.started_at_ms').as('started_at_ms'))
    .groupBy(['job_run.job', 'job_run.scope'])
    .execute()
  return rows.map(toRun)
}

const RUN_COLUMNS = [
  'job_run.job',
  'job_run.scope',
  'job_run.period',
  'job_run.started_at_ms',
  'job_run.finished_at_ms',
  'job_run.counts',
  'job_run.error',
] as const

const toRun = (row: Pick<JobRunTable, 'job' | 'scope' | 'period' | 'started_at_ms' | 'finished_at_ms' | 'counts' | 'error'>): JobRun => ({
  job: row.job,
  scope: row.scope,
  period: row.period,
  startedAtMs: row.started_at_ms,
  finishedAtMs: row.finished_at_ms,
  counts: row.counts === null ? null : fromJson<JobCounts>(row.counts),
  error: row.error,
})

export async function lastJobEnd(db: Kysely<Database>): Promise<number | null> {
  const row = await db
    .selectFrom('job_run')
    .select((eb) => eb.fn.max('finished_at_ms').as('finished_at_ms'))
    .executeTakeFirst()
  return row?.finished_at_ms ?? null
}

/** A run that failed for an organisation as a whole, before it came to a property; its scope is the organisation. */
export async function addFailedRun(
  db: Kysely<Database>,
  run: { readonly job: string; readonly organisationId: OrganisationId; readonly atMs: number; readonly error: string },
): Promise<void> {
  await db
    .insertInto('job_run')
    .values({
      id: newId<string>(),
      job: run.job,
      scope: run.organisationId,
      period: new Date(run.atMs).toISOString().slice(0, 10),
      organisation_id: run.organisationId,
      started_at_ms: run.atMs,
      finished_at_ms: run.atMs,
      counts: null,
      error: run.error,
    })
    .execute()
}
