/** Who can be sent to a property: electricians whose access to it stands. */
import type { PersonId, PropertyId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listAccess, listMembers } from '#db/queries/organisation.ts'

export interface Electrician {
  readonly personId: PersonId
  readonly name: string
  readonly email: string
}

/** Needs no role: whoever asks has been let in by the verb or page before it. */
export async function electriciansOf(db: OrgDb, propertyId: PropertyId): Promise<readonly Electrician[]> {
  const access = await listAccess(db)
  return (await listMembers(db))
    .filter(
      (member) =>
        member.role === 'electrician' &&
        access.some((one) => one.role === 'electrician' && one.personId === member.personId && one.propertyId === propertyId),
    )
    .map(({ personId, name, email }) => ({ personId, name, email }))
}
