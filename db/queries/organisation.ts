/** Organisations, memberships, access to properties, and invitations. */
import type { Kysely, Transaction } from 'kysely'
import type { Role } from '../enums.ts'
import { type InvitationId, newId, type OrganisationId, type PersonId, type PropertyId, type TenancyId } from '../ids.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { Database } from '../schema.ts'

export interface OrganisationOfPerson {
  readonly slug: string
  readonly name: string
  readonly roles: readonly Role[]
}

export async function listOrganisationsOf(db: Kysely<Database>, personId: PersonId): Promise<readonly OrganisationOfPerson[]> {
  const rows = await db
    .selectFrom('membership')
    .innerJoin('organisation', 'organisation.id', 'membership.organisation_id')
    .where('membership.person_id', '=', personId)
    .select(['organisation.slug', 'organisation.name', 'membership.role'])
    .orderBy('organisation.name')
    .execute()
  const bySlug = new Map<string, { slug: string; name: string; roles: Role[] }>()
  for (const { slug, name, role } of rows) {
    const known = bySlug.get(slug)
    if (known) known.roles.push(role)
    else bySlug.set(slug, { slug, name, roles: [role] })
  }
  return [...bySlug.values()]
}

export async function addOrganisation(
  trx: Transaction<Database>,
  fields: { readonly slug: string; readonly name: string; readonly measure: 'metric' | 'us'; readonly createdAtMs: number },
): Promise<OrganisationId | null> {
  const id = newId<OrganisationId>()
  const result = await trx
    .insertInto('organisation')
    .values({ id, slug: fields.slug, name: fields.name, measure: fields.measure, created_at_ms: fields.createdAtMs })
    .onConflict((conflict) => conflict.doNothing())
    .executeTakeFirst()
  return result.numInsertedOrUpdatedRows ? id : null
}

export async function addMembership(
  db: OrgTrx,
  member: { readonly personId: PersonId; readonly role: Role; readonly createdAtMs: number },
): Promise<void> {
  await db
    .insertInto('membership', { person_id: member.personId, role: member.role, created_at_ms: member.createdAtMs })
    .onConflict((conflict) => conflict.doNothing())
    .execute()
}

export interface Member {
  readonly personId: PersonId
  readonly name: string
  readonly email: string
  readonly role: Role
}

export async function listMembers(db: OrgDb): Promise<readonly Member[]> {
  const rows = await db
    .selectFrom('membership')
    .innerJoin('person', 'person.id', 'membership.person_id')
    .select(['membership.person_id', 'person.name', 'person.email', 'membership.role'])
    .orderBy('person.name')
    .execute()
  return rows.map((row) => ({ personId: row.person_id, name: row.name, email: row.email, role: row.role }))
}

export const deleteMembership = (db: OrgTrx, personId: PersonId, role: Role) =>
  db.deleteFrom('membership').where('person_id', '=', personId).where('role', '=', role).execute()

export interface Access {
  readonly personId: PersonId
  readonly propertyId: PropertyId
  readonly role: 'electrician' | 'owner'
}

export async function listAccess(db: OrgDb): Promise<readonly Access[]> {
  const rows = await db
    .selectFrom('property_access')
    .select(['property_access.person_id', 'property_access.property_id', 'property_access.role'])
    .execute()
  return rows.map((row) => ({ personId: row.person_id, propertyId: row.property_id, role: row.role }))
}

export async function hasAccess(db: OrgDb, access: Access): Promise<boolean> {
  const row = await db
    .selectFrom('property_access')
    .where('property_access.person_id', '=', access.personId)
    .where('property_access.property_id', '=', access.propertyId)
    .where('property_access.role', '=', access.role)
    .select('property_access.person_id')
    .executeTakeFirst()
  return row !== undefined
}

export async function addAccess(db: OrgTrx, access: Access, createdAtMs: number): Promise<void> {
  await db
    .insertInto('property_access', {
      person_id: access.personId,
      property_id: access.propertyId,
      role: access.role,
      created_at_ms: createdAtMs,
    })
    .onConflict((conflict) => conflict.doNothing())
    .execute()
}

export const deleteAccess = (db: OrgTrx, access: Access) =>
  db
    .deleteFrom('property_access')
    .where('person_id', '=', access.personId)
    .where('property_id', '=', access.propertyId)
    .where('role', '=', access.role)
    .execute()

/** All access of a person in one role; goes with the role itself. */
export const deleteAccessOf = (db: OrgTrx, personId: PersonId, role: Access['role']) =>
  db.deleteFrom('property_access').where('person_id', '=', personId).where('role', '=', role).execute()

export interface OpenInvitation {
  readonly id: InvitationId
  readonly email: string
  readonly name: string
  readonly role: Role
  readonly expiresAtMs: number
}

export async function listOpenInvitations(db: OrgDb): Promise<readonly OpenInvitation[]> {
  const rows = await db
    .selectFrom('invitation')
    .where('invitation.accepted_at_ms', 'is', null)
    .where('invitation.revoked_at_ms', 'is', null)
    .select(['invitation.id', 'invitation.email', 'invitation.name', 'invitation.role', 'invitation.expires_at_ms'])
    .orderBy('invitation.expires_at_ms')
    .execute()
  return rows.map((row) => ({ id: row.id, email: row.email, name: row.name, role: row.role, expiresAtMs: row.expires_at_ms }))
}

export interface NewInvitationFields {
  readonly email: string
  readonly name: string
  readonly role: Role
  readonly propertyId: PropertyId | null
  readonly tenancyId: TenancyId | null
  readonly tokenHash: string
  readonly createdAtMs: number
  readonly expiresAtMs: number
  readonly invitedBy: PersonId | null
}

export async function addInvitation(db: OrgTrx, fields: NewInvitationFields): Promise<InvitationId> {
  const id = newId<InvitationId>()
  await db
    .insertInto('invitation', {
      id,
      email: fields.email.toLowerCase(),
      name: fields.name,
      role: fields.role,
      property_id: fields.propertyId,
      tenancy_id: fields.tenancyId,
      token_hash: fields.tokenHash,
      created_at_ms: fields.createdAtMs,
      expires_at_ms: fields.expiresAtMs,
      accepted_at_ms: null,
      revoked_at_ms: null,
      invited_by: fields.invitedBy,
    })
    .execute()
  return id
}

/** What an open invitation offers; an expired one is still open to be sent again. */
export async function findOpenInvitation(
  db: OrgDb,
  id: InvitationId,
): Promise<Pick<NewInvitationFields, 'email' | 'name' | 'role' | 'propertyId' | 'tenancyId'> | null> {
  const row = await db
    .selectFrom('invitation')
    .where('invitation.id', '=', id)
    .where('invitation.accepted_at_ms', 'is', null)
    .where('invitation.revoked_at_ms', 'is', null)
    .select(['invitation.email', 'invitation.name', 'invitation.role', 'invitation.property_id', 'invitation.tenancy_id'])
    .executeTakeFirst()
  return row ? { email: row.email, name: row.name, role: row.role, propertyId: row.property_id, tenancyId: row.tenancy_id } : null
}

/** Gives an invitation a new link; the one before stops working. */
export async function changeInvitationToken(
  db: OrgTrx,
  id: InvitationId,
  change: { readonly tokenHash: string; readonly expiresAtMs: number },
): Promise<void> {
  await db.updateTable('invitation', { token_hash: change.tokenHash, expires_at_ms: change.expiresAtMs }).where('id', '=', id).execute()
}

/** Revokes an open invitation; false when it is not there or not open. */
export async function revokeInvitation(db: OrgTrx, id: InvitationId, nowMs: number): Promise<boolean> {
  const result = await db
    .updateTable('invitation', { revoked_at_ms: nowMs })
    .where('id', '=', id)
    .where('accepted_at_ms', 'is', null)
    .where('revoked_at_ms', 'is', null)
    .executeTakeFirst()
  return result.numUpdatedRows > 0n
}

/** Revokes what is open of the same offer to the same address, so that one link at a time holds. */
export async function revokeSameInvitations(
  db: OrgTrx,
  offer: Pick<NewInvitationFields, 'email' | 'role' | 'propertyId' | 'tenancyId'>,
  nowMs: number,
): Promise<void> {
  // SQLite's `is` also compares null with null, and a value with a value.
  await db
    .updateTable('invitation', { revoked_at_ms: nowMs })
    .where('email', '=', offer.email.toLowerCase())
    .where('role', '=', offer.role)
    .where('property_id', 'is', offer.propertyId)
    .where('tenancy_id', 'is', offer.tenancyId)
    .where('accepted_at_ms', 'is', null)
    .where('revoked_at_ms', 'is', null)
    .execute()
}

export interface FoundInvitation {
  readonly id: InvitationId
  readonly organisationId: OrganisationId
  readonly organisationName: string
  readonly organisationSlug: string
  readonly email: string
  readonly name: string
  readonly role: Role
  readonly propertyId: PropertyId | null
  readonly tenancyId: TenancyId | null
}

/** An invitation by its token, before anybody is a member: open, not expired, or `null`. */
export async function findInvitationByToken(db: Kysely<Database>, tokenHash: string, nowMs: number): Promise<FoundInvitation | null> {
  const row = await db
    .selectFrom('invitation')
    .innerJoin('organisation', 'organisation.id', 'invitation.organisation_id')
    .where('invitation.token_hash', '=', tokenHash)
    .where('invitation.accepted_at_ms', 'is', null)
    .where('invitation.revoked_at_ms', 'is', null)
    .where('invitation.expires_at_ms', '>', nowMs)
    .selectAll('invitation')
    .select(['organisation.name as organisation_name', 'organisation.slug as organisation_slug'])
    .executeTakeFirst()
  return row
    ? {
        id: row.id,
        organisationId: row.organisation_id,
        organisationName: row.organisation_name,
        organisationSlug: row.organisation_slug,
        email: row.email,
        name: row.name,
        role: row.role,
        propertyId: row.property_id,
        tenancyId: row.tenancy_id,
      }
    : null
}

/** Takes an invitation once; false when somebody was faster. */
export async function takeInvitation(db: OrgTrx, id: InvitationId, nowMs: number): Promise<boolean> {
  const result = await db
    .updateTable('invitation', { accepted_at_ms: nowMs })
    .where('id', '=', id)
    .where('accepted_at_ms', 'is', null)
    .where('revoked_at_ms', 'is', null)
    .executeTakeFirst()
  return result.numUpdatedRows > 0n
}
