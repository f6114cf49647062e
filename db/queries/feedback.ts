/** A tenant's word on a day, one a day; the last word counts. */
import { newId, type PropertyId, type TenancyId } from '../ids.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'

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
