/** Reads and writes of tariffs and their versions. */
import type { Tariff, TariffVersion } from '#lib/core/tariff/types.ts'
import { newId, type TariffId, type TariffVersionId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'

export interface StoredVersion {
  readonly id: TariffVersionId
  readonly effectiveFrom: string
  readonly version: TariffVersion
  readonly record: unknown
  readonly source: string
}
export interface StoredTariff {
  readonly id: TariffId
  readonly name: string
  readonly tariff: Tariff
  /** Oldest first. */
  readonly stored: readonly StoredVersion[]
}

export async function findStoredTariff(db: OrgDb, id: TariffId): Promise<StoredTariff | null> {
  const head = await db.selectFrom('tariff').where('tariff.id', '=', id).selectAll('tariff').executeTakeFirst()
  if (!head) return null
  const rows = await db
    .selectFrom('tariff_version')
    .where('tariff_version.tariff_id', '=', id)
    .selectAll('tariff_version')
    .orderBy('tariff_version.effective_from')
    .execute()
  const stored = rows.map((row) => ({
    id: row.id,
    effectiveFrom: row.effective_from,
    version: { ...fromJson<TariffVersion>(row.version), effectiveFrom: row.effective_from },
    record: row.record === null ? null : fromJson<unknown>(row.record),
    source: row.source,
  }))
  return { id: head.id, name: head.name, tariff: { zone: head.zone, versions: stored.map((one) => one.version) }, stored }
}

/** The tariff as the core reads it, or `null`. */
export const findTariff = async (db: OrgDb, id: TariffId): Promise<Tariff | null> => (await findStoredTariff(db, id))?.tariff ?? null

export async function addTariff(
  db: OrgTrx,
  fields: { readonly name: string; readonly zone: string; readonly createdAtMs: number },
): Promise<TariffId> {
  const id = newId<TariffId>()
  await db.insertInto('tariff', { id, name: fields.name, zone: fields.zone, created_at_ms: fields.createdAtMs }).execute()
  return id
}

export interface NewVersion {
  readonly tariffId: TariffId
  readonly effectiveFrom: string
  readonly version: TariffVersion
  readonly record: unknown
  readonly source: string
  readonly createdAtMs: number
}

export async function addTariffVersion(db: OrgTrx, fields: NewVersion): Promise<void> {
  await db
    .insertInto('tariff_version', {
      id: newId<TariffVersionId>(),
      tariff_id: fields.tariffId,
      effective_from: fields.effectiveFrom,
      version: toJson(fields.version),
      record: fields.record === null ? null : toJson(fields.record),
      source: fields.source,
      created_at_ms: fields.createdAtMs,
    })
    .execute()
}
