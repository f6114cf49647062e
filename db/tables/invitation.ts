/** `invitation`: an invitation by e-mail: expires, works once; only the token's hash is stored. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, InvitationId, PropertyId, TenancyId } from '../ids.ts'
import type { Role } from '../enums.ts'

export interface InvitationTable {
  organisation_id: OrganisationId
  id: InvitationId
  email: string
  name: string
  role: Role
  property_id: PropertyId | null
  tenancy_id: TenancyId | null
  token_hash: string
  created_at_ms: number
  expires_at_ms: number
  accepted_at_ms: number | null
  revoked_at_ms: number | null
  invited_by: PersonId | null
}

export type InvitationRow = Selectable<InvitationTable>
export type NewInvitation = Insertable<InvitationTable>
export type InvitationPatch = Updateable<InvitationTable>
