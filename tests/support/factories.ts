/** Rows that many tests begin with: an organisation, its people, and a scope for one of them. */
import type { Kysely } from 'kysely'
import type { Role } from '#db/enums.ts'
import { newId, type OrganisationId, type PersonId } from '#db/ids.ts'
import { type OrgDb, orgDb } from '#db/org-db.ts'
import type { Database } from '#db/schema.ts'
import { scopeForNewMember } from '#lib/auth/scope.server.ts'

/** Tuesday 1 December 2026, 12:00 UTC. */
export const NOW_MS = Date.UTC(2026, 11, 1, 12)

let serial = 0
const next = (): number => ++serial

export async function makeOrganisation(db: Kysely<Database>, slug = `house-${next()}`): Promise<{ id: OrganisationId; slug: string }> {
  const id = newId<OrganisationId>()
  await db.insertInto('organisation').values({ id, slug, name: slug, measure: 'metric', created_at_ms: NOW_MS }).execute()
  return { id, slug }
}

export async function makePerson(db: Kysely<Database>, name = `Person ${next()}`): Promise<PersonId> {
  const id = newId<PersonId>()
  const email = `${id}@people.example`
  await db
    .insertInto('person')
    .values({ id, email, name, password_hash: null, email_confirmed_at_ms: NOW_MS, created_at_ms: NOW_MS })
    .execute()
  return id
}

interface Member {
  readonly organisationId: OrganisationId
  readonly personId: PersonId
  readonly roles: readonly Role[]
}

/** Makes the person a member with these roles and answers the organisation as they may see it. */
export async function scopeFor(db: Kysely<Database>, { organisationId, personId, roles }: Member): Promise<OrgDb> {
  for (const role of roles) {
    await db
      .insertInto('membership')
      .values({ organisation_id: organisationId, person_id: personId, role, created_at_ms: NOW_MS })
      .onConflict((conflict) => conflict.doNothing())
      .execute()
  }
  return orgDb(db, scopeForNewMember(organisationId, personId, roles))
}

/** A new organisation with one landlord. */
export async function makeLandlord(db: Kysely<Database>, slug?: string): Promise<OrgDb> {
  const organisation = await makeOrganisation(db, slug)
  const personId = await makePerson(db)
  return scopeFor(db, { organisationId: organisation.id, personId, roles: ['landlord'] })
}
