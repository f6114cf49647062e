/** Reads and writes of hardware revisions and the stop-watch readings that belong to them. */
import type { MeasuredDuration } from '#lib/core/controller/types.ts'
import type { Installation } from '#lib/core/hardware/types.ts'
import { type HardwareRecordId, newId, type PersonId, type PropertyId, type UnitId, type VisitId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'

export interface HardwareRecord {
  readonly id: HardwareRecordId
  readonly unitId: UnitId
  readonly revision: number
  readonly installation: Installation
  readonly reason: string
  readonly recordedAtMs: number
  readonly recordedBy: PersonId | null
  /** Readings of this very controller, oldest first. */
  readonly measured: readonly MeasuredDuration[]
}

interface Joined {
  readonly id: HardwareRecordId
  readonly unit_id: UnitId
  readonly revision: number
  readonly installation: string
  readonly reason: string
  readonly recorded_at_ms: number
  readonly recorded_by: PersonId | null
}
interface Reading {
  readonly hardware_record_id: HardwareRecordId
  readonly duration_min: number
  readonly measured_at_ms: number
}

function toRecords(rows: readonly Joined[], readings: readonly Reading[]): readonly HardwareRecord[] {
  const records = rows.map((row) => ({ row, installation: fromJson<Installation>(row.installation) }))
  return records.map(({ row, installation }) => {
    // A reading stays true for later revisions that keep the same controller.
    const same = new Set(
      records
        .filter(
          (other) =>
            other.row.unit_id === row.unit_id &&
            other.row.revision <= row.revision &&
            toJson(other.installation.controller) === toJson(installation.controller),
        )
        .map((other) => other.row.id),
    )
    return {
      id: row.id,
      unitId: row.unit_id,
      revision: row.revision,
      installation,
      reason: row.reason,
      recordedAtMs: row.recorded_at_ms,
      recordedBy: row.recorded_by,
      measured: readings
        .filter((reading) => same.has(reading.hardware_record_id))
        .map((reading) => ({ durationMin: reading.duration_min, measuredAtMs: reading.measured_at_ms })),
    }
  })
}

const COLUMNS = [
  'hardware_record.id',
  'hardware_record.unit_id',
  'hardware_record.revision',
  'hardware_record.installation',
  'hardware_record.reason',
  'hardware_record.recorded_at_ms',
  'hardware_record.recorded_by',
] as const

/** All revisions of a unit, newest first. */
export async function listHardware(db: OrgDb, unitId: UnitId): Promise<readonly HardwareRecord[]> {
  const rows = await db
    .selectFrom('hardware_record')
    .where('hardware_record.unit_id', '=', unitId)
    .select(COLUMNS)
    .orderBy('hardware_record.revision', 'desc')
    .execute()
  const readings = await db
    .selectFrom('measured_duration')
    .where('measured_duration.unit_id', '=', unitId)
    .select(['measured_duration.hardware_record_id', 'measured_duration.duration_min', 'measured_duration.measured_at_ms'])
    .orderBy('measured_duration.measured_at_ms')
    .execute()
  return toRecords(rows, readings)
}

/** Names of those who recorded a unit's revisions. */
export async function listRecorders(db: OrgDb, unitId: UnitId): Promise<ReadonlyMap<PersonId, string>> {
  const rows = await db
    .selectFrom('hardware_record')
    .innerJoin('person', 'person.id', 'hardware_record.recorded_by')
    .where('hardware_record.unit_id', '=', unitId)
    .select(['person.id', 'person.name'])
    .distinct()
    .execute()
  return new Map(rows.map((row) => [row.id, row.name]))
}

export const currentHardware = async (db: OrgDb, unitId: UnitId): Promise<HardwareRecord | null> =>
  (await listHardware(db, unitId))[0] ?? null

/** The newest revision of every unit of a property, by unit; two statements whatever the number of units. */
export async function listCurrentHardware(db: OrgDb, propertyId: PropertyId): Promise<ReadonlyMap<UnitId, HardwareRecord>> {
  const rows = await db
    .selectFrom('hardware_record')
    .innerJoin('unit', (join) =>
      join.onRef('unit.organisation_id', '=', 'hardware_record.organisation_id').onRef('unit.id', '=', 'hardware_record.unit_id'),
    )
    .where('unit.property_id', '=', propertyId)
    .select(COLUMNS)
    .orderBy('hardware_record.revision')
    .execute()
  const readings = await db
    .selectFrom('measured_duration')
    .innerJoin('unit', (join) =>
      join.onRef('unit.organisation_id', '=', 'measured_duration.organisation_id').onRef('unit.id', '=', 'measured_duration.unit_id'),
    )
    .where('unit.property_id', '=', propertyId)
    .select([
      'measured_duration.hardware_record_id',
      'measured_duration.duration_min',
      'measured_duration.measured_at_ms',
      'measured_duration.unit_id',
    ])
    .orderBy('measured_duration.measured_at_ms')
    .execute()
  const rowsByUnit = byUnit(rows)
  const readingsByUnit = byUnit(readings)
  const current = new Map<UnitId, HardwareRecord>()
  for (const [unitId, revisions] of rowsByUnit) {
    const newest = toRecords(revisions, readingsByUnit.get(unitId) ?? []).at(-1)
    if (newest) current.set(unitId, newest)
  }
  return current
}

function byUnit<Row extends { readonly unit_id: UnitId }>(rows: readonly Row[]): ReadonlyMap<UnitId, readonly Row[]> {
  const grouped = new Map<UnitId, Row[]>()
  for (const row of rows) {
    const group = grouped.get(row.unit_id)
    if (group) group.push(row)
    else grouped.set(row.unit_id, [row])
  }
  return grouped
}

export interface NewRevision {
  readonly unitId: UnitId
  readonly installation: Installation
  readonly reason: string
  readonly visitId: VisitId | null
  readonly recordedBy: PersonId | null
  readonly recordedAtMs: number
}

/** Adds the next revision; the key refuses a second one of the same number. */
export async function addHardwareRevision(
  db: OrgTrx,
  fields: NewRevision,
): Promise<{ readonly recordId: HardwareRecordId; readonly revision: number }> {
  const newest = await db
    .selectFrom('hardware_record')
    .where('hardware_record.unit_id', '=', fields.unitId)
    .select('hardware_record.revision')
    .orderBy('hardware_record.revision', 'desc')
    .limit(1)
    .executeTakeFirst()
  const recordId = newId<HardwareRecordId>()
  const revision = (newest?.revision ?? 0) + 1
  await db
    .insertInto('hardware_record', {
      id: recordId,
      unit_id: fields.unitId,
      revision,
      installation: toJson(fields.installation),
      reason: fields.reason,
      recorded_at_ms: fields.recordedAtMs,
      recorded_by: fields.recordedBy,
      visit_id: fields.visitId,
    })
    .execute()
  return { recordId, revision }
}

export interface NewReading {
  readonly unitId: UnitId
  readonly recordId: HardwareRecordId
  readonly durationMin: number
  readonly measuredBy: PersonId | null
  readonly measuredAtMs: number
}

export async function addMeasuredDuration(db: OrgTrx, reading: NewReading): Promise<void> {
  await db
    .insertInto('measured_duration', {
      id: newId<string>(),
      unit_id: reading.unitId,
      hardware_record_id: reading.recordId,
      duration_min: reading.durationMin,
      measured_at_ms: reading.measuredAtMs,
      measured_by: reading.measuredBy,
    })
    .execute()
}
