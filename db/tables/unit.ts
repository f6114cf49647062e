/** `unit`: a dwelling in a property. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PropertyId, UnitId } from '../ids.ts'

export interface UnitTable {
  organisation_id: OrganisationId
  id: UnitId
  property_id: PropertyId
  code: string
  floor: number | null
  stack: string | null
  created_at_ms: number
}

export type UnitRow = Selectable<UnitTable>
export type NewUnit = Insertable<UnitTable>
export type UnitPatch = Updateable<UnitTable>
