/** Reads and writes of accepted plans and their starts. The newest plan that is not undone stands for what it names. */
import { newId, type PersonId, type PlanId, type PropertyId, type TenancyId, type UnitId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { PlanStartRow } from '../tables/plan-start.ts'

/** What today's starts and the plan's came to when it was accepted; money is `null` without a price. */
export interface PlanFigures {
  readonly beforeCostMinor: number | null
  readonly costMinor: number | null
  readonly beforePeakKw: number
  readonly peakKw: number
  readonly limitKw: number
}
export interface AcceptedPlan {
  readonly id: PlanId
  readonly propertyId: PropertyId
  readonly number: number
  readonly fromDay: string
  readonly toDay: string
  readonly figures: PlanFigures
  readonly acceptedAtMs: number
  readonly acceptedBy: PersonId | null
  readonly undoneAtMs: number | null
  readonly undoneBy: PersonId | null
}
export interface PlanStart {
  readonly unitId: UnitId
  readonly tenancyId: TenancyId
  readonly day: string
  readonly readyByAtMs: number
  readonly startsAtMs: number
  readonly beforeAtMs: number
}

/** All plans of a property, the newest first. */
export async function listPlans(db: OrgDb, propertyId: PropertyId): Promise<readonly AcceptedPlan[]> {
  const rows = await db
    .selectFrom('plan')
    .where('plan.property_id', '=', propertyId)
    .selectAll('plan')
    .orderBy('plan.number', 'desc')
    .execute()
  return rows.map((row) => ({
    id: row.id,
    propertyId: row.property_id,
    number: row.number,
    fromDay: row.from_day,
    toDay: row.to_day,
    figures: fromJson<PlanFigures>(row.figures),
    acceptedAtMs: row.accepted_at_ms,
    acceptedBy: row.accepted_by,
    undoneAtMs: row.undone_at_ms,
    undoneBy: row.undone_by,
  }))
}

const toStart = (row: Omit<PlanStartRow, 'organisation_id' | 'plan_id' | 'property_id'>): PlanStart => ({
  unitId: row.unit_id,
  tenancyId: row.tenancy_id,
  day: row.day,
  readyByAtMs: row.ready_by_at_ms,
  startsAtMs: row.starts_at_ms,
  beforeAtMs: row.before_at_ms,
})
const COLUMNS = [
  'plan_start.unit_id',
  'plan_start.tenancy_id',
  'plan_start.day',
  'plan_start.ready_by_at_ms',
  'plan_start.starts_at_ms',
  'plan_start.before_at_ms',
] as const

export async function listPlanStarts(db: OrgDb, planId: PlanId): Promise<readonly PlanStart[]> {
  const rows = await db
    .selectFrom('plan_start')
    .where('plan_start.plan_id', '=', planId)
    .select(COLUMNS)
    .orderBy('plan_start.starts_at_ms')
    .orderBy('plan_start.unit_id')
    .execute()
  return rows.map(toStart)
}

/** The starts that stand for days `[fromDay, toDay)`: of each need the one of the newest plan that is not undone. */
export async function listStandingStarts(
  db: OrgDb,
  propertyId: PropertyId,
  { fromDay, toDay }: { readonly fromDay: string; readonly toDay: string },
): Promise<readonly PlanStart[]> {
  const rows = await db
    .selectFrom('plan_start')
    .innerJoin('plan', (join) =>
      join.onRef('plan.organisation_id', '=', 'plan_start.organisation_id').onRef('plan.id', '=', 'plan_start.plan_id'),
    )
    .where('plan_start.property_id', '=', propertyId)
    .where('plan_start.day', '>=', fromDay)
    .where('plan_start.day', '<', toDay)
    .where('plan.undone_at_ms', 'is', null)
    .select(COLUMNS)
    .orderBy('plan.number')
    .execute()
  const standing = new Map(rows.map((row) => [`${row.unit_id} ${row.day} ${row.ready_by_at_ms}`, toStart(row)]))
  return [...standing.values()]
}

export interface NewPlanFields {
  readonly propertyId: PropertyId
  readonly number: number
  readonly fromDay: string
  readonly toDay: string
  readonly figures: PlanFigures
  readonly acceptedAtMs: number
  readonly acceptedBy: PersonId | null
}

export async function addPlan(db: OrgTrx, fields: NewPlanFields, starts: readonly PlanStart[]): Promise<PlanId> {
  const id = newId<PlanId>()
  await db
    .insertInto('plan', {
      id,
      property_id: fields.propertyId,
      number: fields.number,
      from_day: fields.fromDay,
      to_day: fields.toDay,
      figures: toJson(fields.figures),
      accepted_at_ms: fields.acceptedAtMs,
      accepted_by: fields.acceptedBy,
      undone_at_ms: null,
      undone_by: null,
    })
    .execute()
  for (const start of starts)
    await db
      .insertInto('plan_start', {
        plan_id: id,
        property_id: fields.propertyId,
        unit_id: start.unitId,
        tenancy_id: start.tenancyId,
        day: start.day,
        ready_by_at_ms: Math.round(start.readyByAtMs),
        starts_at_ms: Math.round(start.startsAtMs),
        before_at_ms: Math.round(start.beforeAtMs),
      })
      .execute()
  return id
}

export async function markUndone(
  db: OrgTrx,
  id: PlanId,
  { undoneAtMs, undoneBy }: { readonly undoneAtMs: number; readonly undoneBy: PersonId | null },
): Promise<void> {
  await db.updateTable('plan', { undone_at_ms: undoneAtMs, undone_by: undoneBy }).where('id', '=', id).execute()
}
