/** Reads and writes of flags: findings about a unit or a property that somebody must act on. */
import type { FlagKind } from '../enums.ts'
import type { FlagId, PersonId, PropertyId, UnitId, VisitId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { FlagRow, FlagTable } from '../tables/flag.ts'

export type FlagSeverity = FlagTable['severity']

/** One line of the numbers behind a flag, in the order in which they are read. */
export interface EvidenceLine {
  readonly kind: 'assumed' | 'found' | 'limit' | 'fix' | 'caution'
  readonly label: string
  readonly value: string
  /** Where it is from: measured, entered, computed, default, a clause. */
  readonly from: string
}
export interface FlagEvidence {
  readonly lines: readonly EvidenceLine[]
  readonly shortfallMin: number | null
  /** The local day of which the figures are. */
  readonly day: string | null
  /** What several findings of one kind are told apart by, e.g. the checks that fail; absent where a kind is one finding. */
  readonly marks?: readonly string[]
}

export interface Flag {
  readonly id: FlagId
  readonly propertyId: PropertyId
  /** `null`: it concerns the whole property. */
  readonly unitId: UnitId | null
  readonly kind: FlagKind
  readonly severity: FlagSeverity
  readonly summary: string
  readonly evidence: FlagEvidence
  readonly openedAtMs: number
  readonly seenAtMs: number
  readonly closed: {
    readonly atMs: number
    readonly because: 'computation' | 'dismissed'
    readonly byPersonId: PersonId | null
    readonly note: string | null
    /** First local day on which a dismissed flag may open again. */
    readonly untilDay: string | null
  } | null
}

const toFlag = (row: FlagRow): Flag => ({
  id: row.id,
  propertyId: row.property_id,
  unitId: row.unit_id,
  kind: row.kind,
  severity: row.severity,
  summary: row.summary,
  evidence: fromJson<FlagEvidence>(row.evidence),
  openedAtMs: row.opened_at_ms,
  seenAtMs: row.seen_at_ms,
  closed:
    row.closed_at_ms === null || row.closed_because === null
      ? null
      : {
          atMs: row.closed_at_ms,
          because: row.closed_because,
          byPersonId: row.closed_by,
          note: row.close_note,
          untilDay: row.dismissed_until,
        },
})

export async function findFlag(db: OrgDb, id: FlagId): Promise<Flag | null> {
  const row = await db.selectFrom('flag').where('flag.id', '=', id).selectAll('flag').executeTakeFirst()
  return row ? toFlag(row) : null
}

/** Open flags of a property, a unit, or the whole organisation, oldest first. */
export async function listOpenFlags(
  db: OrgDb,
  { propertyId, unitId }: { readonly propertyId?: PropertyId; readonly unitId?: UnitId } = {},
): Promise<readonly Flag[]> {
  let query = db.selectFrom('flag').where('flag.closed_at_ms', 'is', null)
  if (propertyId) query = query.where('flag.property_id', '=', propertyId)
  if (unitId) query = query.where('flag.unit_id', '=', unitId)
  const rows = await query.selectAll('flag').orderBy('flag.opened_at_ms').orderBy('flag.id').execute()
  return rows.map(toFlag)
}

/** Closed flags of a property or unit, last closed first. */
export async function listClosedFlags(
  db: OrgDb,
  { propertyId, unitId, limit }: { readonly propertyId: PropertyId; readonly unitId?: UnitId; readonly limit: number },
): Promise<readonly Flag[]> {
  let query = db.selectFrom('flag').where('flag.property_id', '=', propertyId).where('flag.closed_at_ms', 'is not', null)
  if (unitId) query = query.where('flag.unit_id', '=', unitId)
  const rows = await query.selectAll('flag').orderBy('flag.closed_at_ms', 'desc').orderBy('flag.id').limit(limit).execute()
  return rows.map(toFlag)
}

/** Flags of a property that were open at any time in `[fromMs, toMs)`: opened before its end and not closed before its start. */
export async function listFlagsTouched(db: OrgDb, propertyId: PropertyId, fromMs: number, toMs: number): Promise<readonly Flag[]> {
  const rows = await db
    .selectFrom('flag')
    .where('flag.property_id', '=', propertyId)
    .where('flag.opened_at_ms', '<', toMs)
    .where((eb) => eb.or([eb('flag.closed_at_ms', 'is', null), eb('flag.closed_at_ms', '>=', fromMs)]))
    .selectAll('flag')
    .orderBy('flag.opened_at_ms')
    .execute()
  return rows.map(toFlag)
}

/** Dismissals that still hold on `day`: their kind is not opened again for that unit. */
export async function listStandingDismissals(db: OrgDb, propertyId: PropertyId, day: string): Promise<readonly Flag[]> {
  const rows = await db
    .selectFrom('flag')
    .where('flag.property_id', '=', propertyId)
    .where('flag.closed_because', '=', 'dismissed')
    .where('flag.dismissed_until', '>', day)
    .selectAll('flag')
    .execute()
  return rows.map(toFlag)
}

export type NewFlag = Omit<Flag, 'closed' | 'seenAtMs'>

export async function addFlag(db: OrgTrx, flag: NewFlag): Promise<void> {
  await db
    .insertInto('flag', {
      id: flag.id,
      property_id: flag.propertyId,
      unit_id: flag.unitId,
      kind: flag.kind,
      severity: flag.severity,
      summary: flag.summary,
      evidence: toJson(flag.evidence),
      opened_at_ms: flag.openedAtMs,
      seen_at_ms: flag.openedAtMs,
      closed_at_ms: null,
      closed_because: null,
      closed_by: null,
      close_note: null,
      dismissed_until: null,
    })
    .execute()
}

/** Puts today's figures in the place of yesterday's; the flag keeps its age. */
export async function refreshFlag(
  db: OrgTrx,
  id: FlagId,
  found: Pick<Flag, 'severity' | 'summary' | 'evidence' | 'seenAtMs'>,
): Promise<void> {
  await db
    .updateTable('flag', {
      severity: found.severity,
      summary: found.summary,
      evidence: toJson(found.evidence),
      seen_at_ms: found.seenAtMs,
    })
    .where('id', '=', id)
    .execute()
}

export async function closeFlag(db: OrgTrx, id: FlagId, closed: NonNullable<Flag['closed']>): Promise<void> {
  await db
    .updateTable('flag', {
      closed_at_ms: closed.atMs,
      closed_because: closed.because,
      closed_by: closed.byPersonId,
      close_note: closed.note,
      dismissed_until: closed.untilDay,
    })
    .where('id', '=', id)
    .where('closed_at_ms', 'is', null)
    .execute()
}

/** Opens a closed flag again under its old id, so that its age and history stay. */
export async function openFlagAgain(db: OrgTrx, id: FlagId): Promise<void> {
  await db
    .updateTable('flag', { closed_at_ms: null, closed_because: null, closed_by: null, close_note: null, dismissed_until: null })
    .where('id', '=', id)
    .execute()
}

/** A visit that is planned for a flag. */
export interface PlannedVisit {
  readonly flagId: FlagId
  readonly visitId: VisitId
  readonly electricianName: string
  readonly dueDay: string | null
}

/** Planned visits of a property with the flags they answer, one row a flag. */
export async function listPlannedVisits(db: OrgDb, propertyId: PropertyId): Promise<readonly PlannedVisit[]> {
  const rows = await db
    .selectFrom('visit_flag')
    .innerJoin('visit', (join) =>
      join.onRef('visit.organisation_id', '=', 'visit_flag.organisation_id').onRef('visit.id', '=', 'visit_flag.visit_id'),
    )
    .innerJoin('person', 'person.id', 'visit.electrician_id')
    .where('visit.property_id', '=', propertyId)
    .where('visit.state', '=', 'planned')
    .select(['visit_flag.flag_id', 'visit.id', 'person.name', 'visit.due_day'])
    .orderBy('visit.due_day')
    .execute()
  return rows.map((row) => ({ flagId: row.flag_id, visitId: row.id, electricianName: row.name, dueDay: row.due_day }))
}
