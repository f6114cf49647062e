/** Mints organisation scopes: for a signed-in person's request, or for a job that goes through all organisations. Nothing else does. */
import type { Kysely } from 'kysely'
import type { Role } from '#db/enums.ts'
import type { OrganisationId, PersonId } from '#db/ids.ts'
import { type Actor, type OrgDb, type OrgScope, orgDb } from '#db/org-db.ts'
import type { Database } from '#db/schema.ts'

const mint = (organisationId: OrganisationId, actor: Actor): OrgScope => ({ organisationId, actor }) as OrgScope

export interface OrganisationForPerson {
  readonly id: OrganisationId
  readonly slug: string
  readonly name: string
  readonly measure: 'metric' | 'us'
  readonly roles: readonly Role[]
}

/** The organisation under `slug` as this person may see it; `null` when it is not there or not theirs. */
export async function openOrganisation(
  db: Kysely<Database>,
  personId: PersonId,
  slug: string,
): Promise<{ organisation: OrganisationForPerson; db: OrgDb } | null> {
  const rows = await db
    .selectFrom('organisation')
    .innerJoin('membership', 'membership.organisation_id', 'organisation.id')
    .where('organisation.slug', '=', slug)
    .where('membership.person_id', '=', personId)
    .select(['organisation.id', 'organisation.slug', 'organisation.name', 'organisation.measure', 'membership.role'])
    .execute()
  const first = rows[0]
  if (!first) return null
  const roles = rows.map((row) => row.role)
  const { id, name, measure } = first
  return { organisation: { id, slug, name, measure, roles }, db: orgDb(db, mint(id, { kind: 'person', personId, roles })) }
}

/** Scope for a person who has just founded or joined an organisation in this very transaction. */
export const scopeForNewMember = (organisationId: OrganisationId, personId: PersonId, roles: readonly Role[]): OrgScope =>
  mint(organisationId, { kind: 'person', personId, roles })

/** One scope an organisation for a job, in a stable order. One organisation's failure is the caller's to contain. */
export async function organisationsForJob(db: Kysely<Database>, jobName: string): Promise<readonly { slug: string; db: OrgDb }[]> {
  const rows = await db.selectFrom('organisation').select(['id', 'slug']).orderBy('id').execute()
  return rows.map((row) => ({ slug: row.slug, db: orgDb(db, mint(row.id, { kind: 'job', name: jobName })) }))
}

/** Scope of a signed link whose signature has been checked: it acts as the letter's own job, on what the link names. */
export const openForLink = (db: Kysely<Database>, organisationId: OrganisationId): OrgDb =>
  orgDb(db, mint(organisationId, { kind: 'job', name: 'signed-link' }))
