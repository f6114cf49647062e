/** `organisation`: the account: a landlord's business. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId } from '../ids.ts'

export interface OrganisationTable {
  id: OrganisationId
  slug: string
  name: string
  measure: 'metric' | 'us'
  created_at_ms: number
}

export type OrganisationRow = Selectable<OrganisationTable>
export type NewOrganisation = Insertable<OrganisationTable>
export type OrganisationPatch = Updateable<OrganisationTable>
