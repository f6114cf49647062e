/** `property_access`: which properties an electrician or an owner may see. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, PropertyId } from '../ids.ts'

export interface PropertyAccessTable {
  organisation_id: OrganisationId
  person_id: PersonId
  property_id: PropertyId
  role: 'electrician' | 'owner'
  created_at_ms: number
}

export type PropertyAccessRow = Selectable<PropertyAccessTable>
export type NewPropertyAccess = Insertable<PropertyAccessTable>
export type PropertyAccessPatch = Updateable<PropertyAccessTable>
