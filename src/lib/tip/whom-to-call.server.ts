/** Who runs the building and is to be called when water is cold, smells, or a timer does not stop. */
import type { OrgDb } from '#db/org-db.ts'
import { listMembers } from '#db/queries/organisation.ts'

export interface Landlord {
  readonly name: string
  readonly email: string
}

export const landlordsOf = async (db: OrgDb): Promise<readonly Landlord[]> =>
  (await listMembers(db)).filter((member) => member.role === 'landlord').map(({ name, email }) => ({ name, email }))
