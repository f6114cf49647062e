/** Where an organisation's pages are: the slug of their address, for links in its mail. */
import type { PropertyId } from '../ids.ts'
import type { OrgDb } from '../org-db.ts'

export async function findOrganisationSlug(db: OrgDb, propertyId: PropertyId): Promise<string | null> {
  const row = await db
    .selectFrom('property')
    .innerJoin('organisation', 'organisation.id', 'property.organisation_id')
    .where('property.id', '=', propertyId)
    .select('organisation.slug')
    .executeTakeFirst()
  return row?.slug ?? null
}
