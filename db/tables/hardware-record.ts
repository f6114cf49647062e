/** `hardware_record`: what is installed in a unit: a revision, never overwritten. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, UnitId, HardwareRecordId, VisitId } from '../ids.ts'

export interface HardwareRecordTable {
  organisation_id: OrganisationId
  id: HardwareRecordId
  unit_id: UnitId
  revision: number
  installation: string
  reason: string
  recorded_at_ms: number
  recorded_by: PersonId | null
  visit_id: VisitId | null
}

export type HardwareRecordRow = Selectable<HardwareRecordTable>
export type NewHardwareRecord = Insertable<HardwareRecordTable>
export type HardwareRecordPatch = Updateable<HardwareRecordTable>
