/** Reads and writes of evaluations: what the computation found for a unit on a local day. */
import type { Insertable } from 'kysely'
import type { MinuteInterval } from '#lib/core/time/types.ts'
import type { NeedOutcome } from '#lib/core/tank/types.ts'
import type { EvaluationId, HardwareRecordId, PropertyId, UnitId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { EvaluationTable } from '../tables/evaluation.ts'

/** One figure the computation was given, and where it is known from. */
export interface Assumption {
  readonly name: string
  readonly value: string
  readonly from: 'measured' | 'entered' | 'computed' | 'default'
}

export interface ExpectedRun extends MinuteInterval {
  /** End of the run at its longest; `null` = it may never end. */
  readonly longestEndMin: number | null
  readonly short: boolean
}

/** The part of a result that is read as a whole. Minutes are elapsed from the local midnight of the day. */
export interface EvaluationOutcome {
  /** Why there is nothing to show, with status `unknown` and `no-need`; else empty. */
  readonly reason: string
  readonly needs: readonly NeedOutcome[]
  readonly runs: readonly ExpectedRun[]
  readonly peaks: readonly MinuteInterval[]
  readonly dayMin: number
  readonly clockChange: { readonly atMin: number; readonly shiftMin: number } | null
  readonly powerW: number
  /** Whole percent of the tank's usable heat, every `sampleMin`. */
  readonly charge: { readonly sampleMin: number; readonly percent: readonly number[] } | null
}

export type EvaluationStatus = EvaluationTable['status']

export interface Evaluation {
  readonly propertyId: PropertyId
  readonly unitId: UnitId
  readonly day: string
  readonly status: EvaluationStatus
  readonly readyByMin: number | null
  readonly startByMin: number | null
  readonly requiredMin: number | null
  readonly chosenMin: number | null
  readonly shortfallMin: number
  readonly energyInKwh: number
  readonly energyDeliveredKwh: number
  readonly energyLostKwh: number
  readonly peakKwh: number
  readonly costMinor: number | null
  readonly baselineEnergyKwh: number
  readonly baselineCostMinor: number | null
  readonly outcome: EvaluationOutcome
  readonly assumptions: readonly Assumption[]
  readonly hardwareRecordId: HardwareRecordId | null
  /** Of what it was computed from; another one than today's inputs have means that it is out of date. */
  readonly inputsHash: string | null
  readonly evaluatedAtMs: number
}

export type NewEvaluation = Evaluation & { readonly id: EvaluationId }

interface Row extends Omit<EvaluationTable, 'organisation_id' | 'id'> {
  readonly id: EvaluationId
}

const toEvaluation = (row: Row): Evaluation => ({
  propertyId: row.property_id,
  unitId: row.unit_id,
  day: row.day,
  status: row.status,
  readyByMin: row.ready_by_min,
  startByMin: row.start_by_min,
  requiredMin: row.required_min,
  chosenMin: row.chosen_min,
  shortfallMin: row.shortfall_min,
  energyInKwh: row.energy_in_kwh,
  energyDeliveredKwh: row.energy_delivered_kwh,
  energyLostKwh: row.energy_lost_kwh,
  peakKwh: row.peak_kwh,
  costMinor: row.cost_minor,
  baselineEnergyKwh: row.baseline_energy_kwh,
  baselineCostMinor: row.baseline_cost_minor,
  outcome: fromJson<EvaluationOutcome>(row.outcome),
  assumptions: fromJson<readonly Assumption[]>(row.assumptions),
  hardwareRecordId: row.hardware_record_id,
  inputsHash: row.inputs_hash,
  evaluatedAtMs: row.evaluated_at_ms,
})

const toColumns = (value: Evaluation): Omit<Insertable<EvaluationTable>, 'organisation_id' | 'id'> => ({
  property_id: value.propertyId,
  unit_id: value.unitId,
  day: value.day,
  status: value.status,
  ready_by_min: value.readyByMin,
  start_by_min: value.startByMin,
  required_min: value.requiredMin,
  chosen_min: value.chosenMin,
  shortfall_min: value.shortfallMin,
  energy_in_kwh: value.energyInKwh,
  energy_delivered_kwh: value.energyDeliveredKwh,
  energy_lost_kwh: value.energyLostKwh,
  peak_kwh: value.peakKwh,
  cost_minor: value.costMinor,
  baseline_energy_kwh: value.baselineEnergyKwh,
  baseline_cost_minor: value.baselineCostMinor,
  outcome: toJson(value.outcome),
  assumptions: toJson(value.assumptions),
  hardware_record_id: value.hardwareRecordId,
  inputs_hash: value.inputsHash,
  evaluated_at_ms: value.evaluatedAtMs,
})

export async function findEvaluation(db: OrgDb, unitId: UnitId, day: string): Promise<Evaluation | null> {
  const row = await db
    .selectFrom('evaluation')
    .where('evaluation.unit_id', '=', unitId)
    .where('evaluation.day', '=', day)
    .selectAll('evaluation')
    .executeTakeFirst()
  return row ? toEvaluation(row) : null
}

/** All units' evaluations of a property for days `[fromDay, toDay)`. */
export async function listEvaluations(db: OrgDb, propertyId: PropertyId, fromDay: string, toDay: string): Promise<readonly Evaluation[]> {
  const rows = await db
    .selectFrom('evaluation')
    .where('evaluation.property_id', '=', propertyId)
    .where('evaluation.day', '>=', fromDay)
    .where('evaluation.day', '<', toDay)
    .selectAll('evaluation')
    .orderBy('evaluation.day')
    .orderBy('evaluation.unit_id')
    .execute()
  return rows.map(toEvaluation)
}

/** One unit's evaluations for days `[fromDay, toDay)`, in order. */
export async function listUnitEvaluations(db: OrgDb, unitId: UnitId, fromDay: string, toDay: string): Promise<readonly Evaluation[]> {
  const rows = await db
    .selectFrom('evaluation')
    .where('evaluation.unit_id', '=', unitId)
    .where('evaluation.day', '>=', fromDay)
    .where('evaluation.day', '<', toDay)
    .selectAll('evaluation')
    .orderBy('evaluation.day')
    .execute()
  return rows.map(toEvaluation)
}

/** Writes the evaluation of a unit and day, in the place of an earlier one. */
export async function putEvaluation(db: OrgTrx, value: NewEvaluation): Promise<void> {
  const columns = toColumns(value)
  await db
    .insertInto('evaluation', { id: value.id, ...columns })
    .onConflict((conflict) => conflict.columns(['organisation_id', 'unit_id', 'day']).doUpdateSet(columns))
    .execute()
}

/** Removes what can no longer be called current: days of `[fromDay, toDay)` of units that could not be computed. */
export async function removeEvaluations(db: OrgTrx, unitIds: readonly UnitId[], fromDay: string, toDay: string): Promise<void> {
  if (unitIds.length === 0) return
  await db.deleteFrom('evaluation').where('unit_id', 'in', unitIds).where('day', '>=', fromDay).where('day', '<', toDay).execute()
}
