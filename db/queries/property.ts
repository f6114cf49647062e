/** Reads and writes of properties. */
import type { InletClimate } from '#lib/core/tank/types.ts'
import { newId, type PropertyId, type TariffId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { PropertyRow } from '../tables/property.ts'

export interface Property {
  readonly id: PropertyId
  readonly slug: string
  readonly name: string
  readonly address: string
  readonly zone: string
  readonly country: string
  readonly currency: string
  readonly ruleProfile: PropertyRow['rule_profile']
  readonly hygienePolicy: PropertyRow['hygiene_policy']
  readonly supplyVoltageV: number
  readonly phases: number
  readonly serviceRatingA: number
  readonly baseLoadW: number
  readonly climate: InletClimate
  readonly tariffId: TariffId | null
  readonly sendingPausedAtMs: number | null
}

const toProperty = (row: PropertyRow): Property => ({
  id: row.id,
  slug: row.slug,
  name: row.name,
  address: row.address,
  zone: row.zone,
  country: row.country,
  currency: row.currency,
  ruleProfile: row.rule_profile,
  hygienePolicy: row.hygiene_policy,
  supplyVoltageV: row.supply_voltage_v,
  phases: row.phases,
  serviceRatingA: row.service_rating_a,
  baseLoadW: row.base_load_w,
  climate: fromJson<InletClimate>(row.climate),
  tariffId: row.tariff_id,
  sendingPausedAtMs: row.sending_paused_at_ms,
})

export async function listProperties(db: OrgDb): Promise<readonly Property[]> {
  const rows = await db.selectFrom('property').selectAll('property').orderBy('property.name').execute()
  return rows.map(toProperty)
}

export async function findProperty(db: OrgDb, id: PropertyId): Promise<Property | null> {
  const row = await db.selectFrom('property').where('property.id', '=', id).selectAll('property').executeTakeFirst()
  return row ? toProperty(row) : null
}

export async function findPropertyBySlug(db: OrgDb, slug: string): Promise<Property | null> {
  const row = await db.selectFrom('property').where('property.slug', '=', slug).selectAll('property').executeTakeFirst()
  return row ? toProperty(row) : null
}

export type PropertyFields = Omit<Property, 'id' | 'tariffId' | 'sendingPausedAtMs'>

const columns = (fields: PropertyFields) => ({
  slug: fields.slug,
  name: fields.name,
  address: fields.address,
  zone: fields.zone,
  country: fields.country,
  currency: fields.currency,
  rule_profile: fields.ruleProfile,
  hygiene_policy: fields.hygienePolicy,
  supply_voltage_v: fields.supplyVoltageV,
  phases: fields.phases,
  service_rating_a: fields.serviceRatingA,
  base_load_w: fields.baseLoadW,
  climate: toJson(fields.climate),
})

export async function addProperty(db: OrgTrx, fields: PropertyFields, createdAtMs: number): Promise<PropertyId> {
  const id = newId<PropertyId>()
  await db
    .insertInto('property', { id, ...columns(fields), tariff_id: null, sending_paused_at_ms: null, created_at_ms: createdAtMs })
    .execute()
  return id
}

export async function changeProperty(db: OrgTrx, id: PropertyId, fields: PropertyFields): Promise<void> {
  await db.updateTable('property', columns(fields)).where('id', '=', id).execute()
}

export async function changePropertyTariff(db: OrgTrx, id: PropertyId, tariffId: TariffId | null): Promise<void> {
  await db.updateTable('property', { tariff_id: tariffId }).where('id', '=', id).execute()
}

/** `null` lets sending go on. */
export async function changeSendingPaused(db: OrgTrx, id: PropertyId, pausedAtMs: number | null): Promise<void> {
  await db.updateTable('property', { sending_paused_at_ms: pausedAtMs }).where('id', '=', id).execute()
}
