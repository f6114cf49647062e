/** `plan_start`: when a tenant is asked to start for one need of one day, and when they would have started before the plan. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PlanId, PropertyId, TenancyId, UnitId } from '../ids.ts'

export interface PlanStartTable {
  organisation_id: OrganisationId
  plan_id: PlanId
  property_id: PropertyId
  unit_id: UnitId
  /** Who agreed: a start does not pass to the next tenant. */
  tenancy_id: TenancyId
  /** The local day of the need. */
  day: string
  /** Of the need; another one is another need, and the start does not hold for it. */
  ready_by_at_ms: number
  starts_at_ms: number
  before_at_ms: number
}

export type PlanStartRow = Selectable<PlanStartTable>
export type NewPlanStart = Insertable<PlanStartTable>
export type PlanStartPatch = Updateable<PlanStartTable>
