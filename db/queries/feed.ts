/** The secret calendar address of a tenancy: made, looked up, replaced, taken away. */
import type { Connection } from './account.ts'
import { type FeedId, newId, type OrganisationId, type TenancyId } from '../ids.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'

export interface Feed {
  readonly id: FeedId
  readonly createdAtMs: number
}

export async function findFeed(db: OrgDb, tenancyId: TenancyId): Promise<Feed | null> {
  const row = await db
    .selectFrom('calendar_feed')
    .where('calendar_feed.tenancy_id', '=', tenancyId)
    .select(['calendar_feed.id', 'calendar_feed.created_at_ms'])
    .executeTakeFirst()
  return row ? { id: row.id, createdAtMs: row.created_at_ms } : null
}

/** Whose a feed is. A calendar program names nothing but the address, so this looks in every organisation. */
export async function findFeedOwner(
  db: Connection,
  id: FeedId,
): Promise<{ readonly organisationId: OrganisationId; readonly tenancyId: TenancyId } | null> {
  const row = await db.selectFrom('calendar_feed').where('id', '=', id).select(['organisation_id', 'tenancy_id']).executeTakeFirst()
  return row ? { organisationId: row.organisation_id, tenancyId: row.tenancy_id } : null
}

/** A new address in the place of the old one, which is then nobody's. */
export async function replaceFeed(db: OrgTrx, tenancyId: TenancyId, createdAtMs: number): Promise<void> {
  const id = newId<FeedId>()
  await db
    .insertInto('calendar_feed', { tenancy_id: tenancyId, id, created_at_ms: createdAtMs })
    .onConflict((conflict) => conflict.columns(['organisation_id', 'tenancy_id']).doUpdateSet({ id, created_at_ms: createdAtMs }))
    .execute()
}

export async function removeFeed(db: OrgTrx, tenancyId: TenancyId): Promise<void> {
  await db.deleteFrom('calendar_feed').where('tenancy_id', '=', tenancyId).execute()
}
