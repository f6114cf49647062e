/** `tenancy`: who rents a unit from which day until which day (exclusive). */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, UnitId, TenancyId } from '../ids.ts'

export interface TenancyTable {
  organisation_id: OrganisationId
  id: TenancyId
  unit_id: UnitId
  person_id: PersonId | null
  name: string
  email: string
  from_day: string
  to_day: string | null
  tips: 'daily' | 'weekly' | 'on-change' | 'never'
  created_at_ms: number
}

export type TenancyRow = Selectable<TenancyTable>
export type NewTenancy = Insertable<TenancyTable>
export type TenancyPatch = Updateable<TenancyTable>
