/** Whose access to which property a form names: both must be of this organisation, and the person must hold the role. */
import { parsePersonId, parsePropertyId } from '#db/ids.ts'
import type { OrgTrx } from '#db/org-db.ts'
import { type Access, listMembers } from '#db/queries/organisation.ts'
import { findProperty } from '#db/queries/property.ts'
import { notFound } from '#lib/http/app-error.ts'

export interface AccessFields {
  readonly personId: unknown
  readonly propertyId: unknown
  readonly role: unknown
}

/** The two roles that see the properties given to them and no other. */
const LIMITED_ROLES = ['electrician', 'owner'] as const

export async function ownedAccess(trx: OrgTrx, fields: AccessFields): Promise<Access> {
  const personId = parsePersonId(fields.personId)
  const propertyId = parsePropertyId(fields.propertyId)
  const role = LIMITED_ROLES.find((known) => known === fields.role)
  const members = await listMembers(trx)
  if (!personId || !role || !members.some((member) => member.personId === personId && member.role === role)) throw notFound('member')
  if (!propertyId || !(await findProperty(trx, propertyId))) throw notFound('property')
  return { personId, propertyId, role }
}
