/** `visit`: an electrician's piece of work at a unit. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, PropertyId, UnitId, VisitId } from '../ids.ts'

export interface VisitTable {
  organisation_id: OrganisationId
  id: VisitId
  property_id: PropertyId
  unit_id: UnitId
  electrician_id: PersonId
  state: 'planned' | 'done' | 'cancelled'
  due_day: string | null
  note: string
  proposal: string
  created_at_ms: number
  created_by: PersonId | null
  done_at_ms: number | null
  done_by: PersonId | null
  report: string | null
}

export type VisitRow = Selectable<VisitTable>
export type NewVisit = Insertable<VisitTable>
export type VisitPatch = Updateable<VisitTable>
