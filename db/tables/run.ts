/** `run`: one switching-on of a unit's load. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PropertyId, UnitId, RunId } from '../ids.ts'

export interface RunTable {
  organisation_id: OrganisationId
  id: RunId
  property_id: PropertyId
  unit_id: UnitId
  day: string
  kind: 'expected' | 'planned' | 'measured'
  starts_at_ms: number
  ends_at_ms: number
  longest_ends_at_ms: number | null
  window_starts_at_ms: number
  window_ends_at_ms: number
  ready_by_at_ms: number
  power_w: number
  short: 0 | 1
}

export type RunRow = Selectable<RunTable>
export type NewRun = Insertable<RunTable>
export type RunPatch = Updateable<RunTable>
