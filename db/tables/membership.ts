/** `membership`: a person's role in an organisation; one person may hold several. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId } from '../ids.ts'
import type { Role } from '../enums.ts'

export interface MembershipTable {
  organisation_id: OrganisationId
  person_id: PersonId
  role: Role
  created_at_ms: number
}

export type MembershipRow = Selectable<MembershipTable>
export type NewMembership = Insertable<MembershipTable>
export type MembershipPatch = Updateable<MembershipTable>
