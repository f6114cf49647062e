/** Reads and writes of shower weeks; the newest row of a tenancy counts. */
import { newId, type PersonId, type PreferenceId, type PropertyId, type TenancyId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'

export interface PreferredShower {
  readonly readyByMinuteOfDay: number
  readonly count: number
  readonly minutesEach: number
  readonly gapMin: number
  readonly flowLPerMin: number
  readonly useTemperatureC: number
}
export interface WillingHours {
  readonly fromMinuteOfDay: number
  readonly toMinuteOfDay: number
}
export interface Preference {
  readonly tenancyId: TenancyId
  /** Monday first. */
  readonly week: readonly (readonly PreferredShower[])[]
  readonly willing: readonly WillingHours[]
  readonly setAtMs: number
}

interface Row {
  readonly tenancy_id: TenancyId
  readonly week: string
  readonly willing: string
  readonly set_at_ms: number
}
const toPreference = (row: Row): Preference => ({
  tenancyId: row.tenancy_id,
  week: fromJson<Preference['week']>(row.week),
  willing: fromJson<Preference['willing']>(row.willing),
  setAtMs: row.set_at_ms,
})

export async function findPreference(db: OrgDb, tenancyId: TenancyId): Promise<Preference | null> {
  const row = await db
    .selectFrom('preference')
    .where('preference.tenancy_id', '=', tenancyId)
    .selectAll('preference')
    .orderBy('preference.set_at_ms', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ? toPreference(row) : null
}

/** The newest week of every tenancy of a property. */
export async function currentPreferences(db: OrgDb, propertyId: PropertyId): Promise<ReadonlyMap<TenancyId, Preference>> {
  const rows = await db
    .selectFrom('preference')
    .innerJoin('tenancy', (join) =>
      join.onRef('tenancy.organisation_id', '=', 'preference.organisation_id').onRef('tenancy.id', '=', 'preference.tenancy_id'),
    )
    .innerJoin('unit', (join) =>
      join.onRef('unit.organisation_id', '=', 'tenancy.organisation_id').onRef('unit.id', '=', 'tenancy.unit_id'),
    )
    .where('unit.property_id', '=', propertyId)
    .select(['preference.tenancy_id', 'preference.week', 'preference.willing', 'preference.set_at_ms'])
    .orderBy('preference.set_at_ms')
    .execute()
  return new Map(rows.map((row) => [row.tenancy_id, toPreference(row)]))
}

export interface NewPreferenceFields {
  readonly tenancyId: TenancyId
  readonly week: Preference['week']
  readonly willing: Preference['willing']
  readonly setBy: PersonId | null
  readonly setAtMs: number
}

export async function addPreference(db: OrgTrx, fields: NewPreferenceFields): Promise<void> {
  await db
    .insertInto('preference', {
      id: newId<PreferenceId>(),
      tenancy_id: fields.tenancyId,
      week: toJson(fields.week),
      willing: toJson(fields.willing),
      set_at_ms: fields.setAtMs,
      set_by: fields.setBy,
    })
    .execute()
}
