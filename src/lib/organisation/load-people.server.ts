/** What the People page shows: members with their roles and properties, and open invitations. */
import type { OrgDb } from '#db/org-db.ts'
import { listAccess, listMembers, listOpenInvitations } from '#db/queries/organisation.ts'
import { listProperties } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'

export async function loadPeople(db: OrgDb) {
  requireRole(db, ['landlord'], 'see the people')
  const [members, invitations, access, properties] = [
    await listMembers(db),
    await listOpenInvitations(db),
    await listAccess(db),
    await listProperties(db),
  ]
  const nameOf = new Map(properties.map((property) => [property.id, property.name]))
  return {
    invitations,
    properties: properties.map(({ id, name }) => ({ id, name })),
    members: members.map((member) => ({
      ...member,
      properties: access
        .filter((one) => one.personId === member.personId && one.role === member.role)
        .map((one) => nameOf.get(one.propertyId) ?? ''),
    })),
  }
}
