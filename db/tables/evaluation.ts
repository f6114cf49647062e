/** `evaluation`: what the computation found for a unit on a local day. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { OrganisationId, PropertyId, UnitId, HardwareRecordId, EvaluationId } from '../ids.ts'

export interface EvaluationTable {
  organisation_id: OrganisationId
  id: EvaluationId
  property_id: PropertyId
  unit_id: UnitId
  day: string
  status: 'ready' | 'short' | 'impossible' | 'no-need' | 'unknown'
  ready_by_min: number | null
  start_by_min: number | null
  required_min: number | null
  chosen_min: number | null
  shortfall_min: number
  energy_in_kwh: number
  energy_delivered_kwh: number
  energy_lost_kwh: number
  peak_kwh: number
  cost_minor: number | null
  baseline_energy_kwh: number
  baseline_cost_minor: number | null
  outcome: string
  assumptions: string
  hardware_record_id: HardwareRecordId | null
  /** Of what it was computed from; another one means that it is out of date. */
  inputs_hash: string | null
  evaluated_at_ms: number
}

export type EvaluationRow = Selectable<EvaluationTable>
export type NewEvaluation = Insertable<EvaluationTable>
export type EvaluationPatch = Updateable<EvaluationTable>
