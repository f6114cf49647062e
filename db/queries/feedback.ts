/** A tenant's word on a day, one a day; the last word counts. */
import { type HardwareRecordId, newId, type PropertyId, type TenancyId, type UnitId } from '../ids.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { EvaluationStatus } from './evaluation.ts'

export interface Feedback {
  readonly tenancyId: TenancyId
  readonly day: string
  readonly verdict: 'hot' | 'cold'
}

export async function putFeedback(db: OrgTrx, feedback: Feedback, givenAtMs: number): Promise<void> {
  await db
    .insertInto('feedback', {
      id: newId<string>(),
      tenancy_id: feedback.tenancyId,
      day: feedback.day,
      verdict: feedback.verdict,
      given_at_ms: givenAtMs,
    })
    .onConflict((conflict) =>
      conflict.columns(['organisation_id', 'tenancy_id', 'day']).doUpdateSet({ verdict: feedback.verdict, given_at_ms: givenAtMs }),
    )
    .execute()
}

export async function findFeedback(db: OrgDb, tenancyId: TenancyId, day: string): Promise<'hot' | 'cold' | null> {
  const row = await db
    .selectFrom('feedback')
    .where('feedback.tenancy_id', '=', tenancyId)
    .where('feedback.day', '=', day)
    .select('feedback.verdict')
    .executeTakeFirst()
  return row?.verdict ?? null
}

/** How often each word was given at a property on the days `[fromDay, toDay)`; no names. */
export async function countFeedback(
  db: OrgDb,
  propertyId: PropertyId,
  days: { readonly fromDay: string; readonly toDay: string },
): Promise<{ readonly hot: number; readonly cold: number }> {
  const rows = await db
    .selectFrom('feedback')
    .innerJoin('tenancy', (join) =>
      join.onRef('tenancy.organisation_id', '=', 'feedback.organisation_id').onRef('tenancy.id', '=', 'feedback.tenancy_id'),
    )
    .innerJoin('unit', (join) =>
      join.onRef('unit.organisation_id', '=', 'tenancy.organisation_id').onRef('unit.id', '=', 'tenancy.unit_id'),
    )
    .where('unit.property_id', '=', propertyId)
    .where('feedback.day', '>=', days.fromDay)
    .where('feedback.day', '<', days.toDay)
    .select('feedback.verdict')
    .execute()
  return { hot: rows.filter((row) => row.verdict === 'hot').length, cold: rows.filter((row) => row.verdict === 'cold').length }
}

/** A day that was answered, beside what had been computed of it; `null` = nothing was. */
export interface AnsweredDay extends Feedback {
  readonly unitId: UnitId
  readonly givenAtMs: number
  readonly evaluated: { readonly status: EvaluationStatus; readonly hardwareRecordId: HardwareRecordId | null } | null
}

/** Answers of a property, a unit or a tenancy about days from `fromDay` on, newest first. */
export async function listAnsweredDays(
  db: OrgDb,
  of: { readonly propertyId: PropertyId } | { readonly unitId: UnitId } | { readonly tenancyId: TenancyId },
  fromDay: string,
): Promise<readonly AnsweredDay[]> {
  let query = db
    .selectFrom('feedback')
    .innerJoin('tenancy', (join) =>
      join.onRef('tenancy.organisation_id', '=', 'feedback.organisation_id').onRef('tenancy.id', '=', 'feedback.tenancy_id'),
    )
    .innerJoin('unit', (join) =>
      join.onRef('unit.organisation_id', '=', 'tenancy.organisation_id').onRef('unit.id', '=', 'tenancy.unit_id'),
    )
    .leftJoin('evaluation', (join) =>
      join
        .onRef('evaluation.organisation_id', '=', 'feedback.organisation_id')
        .onRef('evaluation.unit_id', '=', 'tenancy.unit_id')
        .onRef('evaluation.day', '=', 'feedback.day'),
    )
    .where('feedback.day', '>=', fromDay)
  if ('propertyId' in of) query = query.where('unit.property_id', '=', of.propertyId)
  if ('unitId' in of) query = query.where('tenancy.unit_id', '=', of.unitId)
  if ('tenancyId' in of) query = query.where('feedback.tenancy_id', '=', of.tenancyId)
  const rows = await query
    .select([
      'feedback.tenancy_id',
      'tenancy.unit_id',
      'feedback.day',
      'feedback.verdict',
      'feedback.given_at_ms',
      'evaluation.status',
      'evaluation.hardware_record_id',
    ])
    .orderBy('feedback.day', 'desc')
    .execute()
  return rows.map((row) => ({
    tenancyId: row.tenancy_id,
    unitId: row.unit_id,
    day: row.day,
    verdict: row.verdict,
    givenAtMs: row.given_at_ms,
    evaluated: row.status && { status: row.status, hardwareRecordId: row.hardware_record_id },
  }))
}
