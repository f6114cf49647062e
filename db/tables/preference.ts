/** `preference`: a tenant's week of showers; the newest row of a tenancy counts. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, TenancyId, PreferenceId } from '../ids.ts'

export interface PreferenceTable {
  organisation_id: OrganisationId
  id: PreferenceId
  tenancy_id: TenancyId
  week: string
  willing: string
  set_at_ms: number
  set_by: PersonId | null
}

export type PreferenceRow = Selectable<PreferenceTable>
export type NewPreference = Insertable<PreferenceTable>
export type PreferencePatch = Updateable<PreferenceTable>
