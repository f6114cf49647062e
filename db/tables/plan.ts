/** `plan`: coordinated starts that a landlord accepted, and whether they were undone. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PersonId, PlanId, PropertyId } from '../ids.ts'

export interface PlanTable {
  organisation_id: OrganisationId
  id: PlanId
  property_id: PropertyId
  /** Counts a property's plans from 1; the highest that is not undone stands. */
  number: number
  from_day: string
  /** Exclusive. */
  to_day: string
  figures: string
  accepted_at_ms: number
  accepted_by: PersonId | null
  undone_at_ms: number | null
  undone_by: PersonId | null
}

export type PlanRow = Selectable<PlanTable>
export type NewPlan = Insertable<PlanTable>
export type PlanPatch = Updateable<PlanTable>
