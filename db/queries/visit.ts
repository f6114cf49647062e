/** Reads and writes of electricians' visits. */
import { type FlagId, newId, type PersonId, type PropertyId, type UnitId, type VisitId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { EvidenceLine } from './flag.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { VisitTable } from '../tables/visit.ts'

/** What the electrician is asked to do, as computed when the visit was planned. */
export interface VisitProposal {
  /** Each finding in a sentence. */
  readonly findings: readonly string[]
  /** Changes that would fix it, each with where it is from. */
  readonly changes: readonly string[]
  /** The numbers behind each finding as they stood then; absent in visits planned before they were kept. */
  readonly evidence?: readonly { readonly summary: string; readonly lines: readonly EvidenceLine[] }[]
  /** What a visit without a flag answers, such as a clock change; one visit a unit and cause. */
  readonly cause?: string
}

export interface Visit {
  readonly id: VisitId
  readonly propertyId: PropertyId
  readonly unitId: UnitId
  readonly unitCode: string
  readonly propertyName: string
  readonly propertySlug: string
  readonly zone: string
  readonly electricianId: PersonId
  readonly state: VisitTable['state']
  readonly dueDay: string | null
  readonly note: string
  readonly proposal: VisitProposal
  readonly createdAtMs: number
  readonly createdBy: PersonId | null
  readonly doneAtMs: number | null
}

const joined = (db: OrgDb) =>
  db
    .selectFrom('visit')
    .innerJoin('unit', (join) => join.onRef('unit.organisation_id', '=', 'visit.organisation_id').onRef('unit.id', '=', 'visit.unit_id'))
    .innerJoin('property', (join) =>
      join.onRef('property.organisation_id', '=', 'visit.organisation_id').onRef('property.id', '=', 'visit.property_id'),
    )
    .select([
      'visit.id',
      'visit.property_id',
      'visit.unit_id',
      'visit.electrician_id',
      'visit.state',
      'visit.due_day',
      'visit.note',
      'visit.proposal',
      'visit.created_at_ms',
      'visit.created_by',
      'visit.done_at_ms',
      'unit.code',
      'property.name',
      'property.slug',
      'property.zone',
    ])

const toVisit = (row: Awaited<ReturnType<ReturnType<typeof joined>['executeTakeFirstOrThrow']>>): Visit => ({
  id: row.id,
  propertyId: row.property_id,
  unitId: row.unit_id,
  unitCode: row.code,
  propertyName: row.name,
  propertySlug: row.slug,
  zone: row.zone,
  electricianId: row.electrician_id,
  state: row.state,
  dueDay: row.due_day,
  note: row.note,
  proposal: fromJson<VisitProposal>(row.proposal),
  createdAtMs: row.created_at_ms,
  createdBy: row.created_by,
  doneAtMs: row.done_at_ms,
})

export async function findVisit(db: OrgDb, id: VisitId): Promise<Visit | null> {
  const row = await joined(db).where('visit.id', '=', id).executeTakeFirst()
  return row ? toVisit(row) : null
}

/** An electrician's visits: planned first by due day, then the newest done. */
export async function listVisitsOf(db: OrgDb, electricianId: PersonId): Promise<readonly Visit[]> {
  const rows = await joined(db)
    .where('visit.electrician_id', '=', electricianId)
    .where('visit.state', '<>', 'cancelled')
    .orderBy('visit.due_day')
    .execute()
  return rows.map(toVisit)
}

/** All visits of the organisation but cancelled ones. */
export async function listVisits(db: OrgDb): Promise<readonly Visit[]> {
  const rows = await joined(db).where('visit.state', '<>', 'cancelled').orderBy('visit.due_day').execute()
  return rows.map(toVisit)
}

export async function listVisitsOfProperty(db: OrgDb, propertyId: PropertyId): Promise<readonly Visit[]> {
  const rows = await joined(db).where('visit.property_id', '=', propertyId).orderBy('visit.due_day').execute()
  return rows.map(toVisit)
}

export interface NewVisitFields {
  readonly propertyId: PropertyId
  readonly unitId: UnitId
  readonly flagIds: readonly FlagId[]
  readonly electricianId: PersonId
  readonly dueDay: string | null
  readonly note: string
  readonly proposal: VisitProposal
  readonly createdBy: PersonId | null
  readonly createdAtMs: number
}

export async function addVisit(db: OrgTrx, fields: NewVisitFields): Promise<VisitId> {
  const id = newId<VisitId>()
  await db
    .insertInto('visit', {
      id,
      property_id: fields.propertyId,
      unit_id: fields.unitId,
      electrician_id: fields.electricianId,
      state: 'planned',
      due_day: fields.dueDay,
      note: fields.note,
      proposal: toJson(fields.proposal),
      created_at_ms: fields.createdAtMs,
      created_by: fields.createdBy,
      done_at_ms: null,
      done_by: null,
      report: null,
    })
    .execute()
  for (const flagId of fields.flagIds) await db.insertInto('visit_flag', { visit_id: id, flag_id: flagId }).execute()
  return id
}

export interface VisitDone {
  readonly doneBy: PersonId | null
  readonly doneAtMs: number
  readonly report: unknown
}

/** Marks a planned visit as done; false when it is not planned any more: however often it is sent, it is done once. */
export async function completeVisit(db: OrgTrx, id: VisitId, done: VisitDone): Promise<boolean> {
  const result = await db
    .updateTable('visit', { state: 'done', done_at_ms: done.doneAtMs, done_by: done.doneBy, report: toJson(done.report) })
    .where('id', '=', id)
    .where('state', '=', 'planned')
    .executeTakeFirst()
  return result.numUpdatedRows > 0n
}
