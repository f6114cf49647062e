/** `measured_duration`: a stop-watch reading of a unit's controller. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, UnitId, HardwareRecordId } from '../ids.ts'

export interface MeasuredDurationTable {
  organisation_id: OrganisationId
  id: string
  unit_id: UnitId
  hardware_record_id: HardwareRecordId
  duration_min: number
  measured_at_ms: number
  measured_by: PersonId | null
}

export type MeasuredDurationRow = Selectable<MeasuredDurationTable>
export type NewMeasuredDuration = Insertable<MeasuredDurationTable>
export type MeasuredDurationPatch = Updateable<MeasuredDurationTable>
