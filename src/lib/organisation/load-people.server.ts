/** What the People page shows: members with their roles and properties, and open invitations. */
import type { OrgDb } from '#db/org-db.ts'
import { listAccess, listMembers, listOpenInvitations } from '#db/queries/organisation.ts'
import { listProperties } from '#db/queries/property.ts'
import { requireRole } from '#lib/auth/permission.ts'

export async function loadPeople(db: OrgDb, nowMs: number) {
  requireRole(db, ['landlord'], 'see the people')
  const members = await listMembers(db)
  const invitations = await listOpenInvitations(db)
  const access = await listAccess(db)
  const properties = (await listProperties(db)).map(({ id, name }) => ({ id, name }))
  return {
    properties,
    personCount: new Set(members.map((member) => member.personId)).size,
    invitations: invitations.map((invitation) => ({ ...invitation, hasExpired: invitation.expiresAtMs <= nowMs })),
    members: members.map((member) => {
      const theirs = access.filter((one) => one.personId === member.personId && one.role === member.role)
      const isOpen = (property: (typeof properties)[number]) => theirs.some((one) => one.propertyId === property.id)
      return {
        ...member,
        /** Whether this role sees only the properties that were opened to it. */
        isLimited: member.role === 'electrician' || member.role === 'owner',
        openProperties: properties.filter(isOpen),
        otherProperties: properties.filter((property) => !isOpen(property)),
      }
    }),
  }
}
