/** Reads and writes of tariffs and their versions. */
import type { Tariff, TariffVersion } from '#lib/core/tariff/types.ts'
import { newId, type TariffId, type TariffVersionId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'

export interface StoredVersion {
  readonly id: TariffVersionId
  readonly effectiveFrom: string
  readonly edition: number
  readonly reason: string | null
  readonly createdAtMs: number
  readonly version: TariffVersion
  readonly record: unknown
  readonly source: string
}
export interface StoredTariff {
  readonly id: TariffId
  readonly name: string
  readonly tariff: Tariff
  /** Oldest first; of corrected versions, the last edition. */
  readonly stored: readonly StoredVersion[]
  /** Editions that were corrected, oldest first. */
  readonly corrected: readonly StoredVersion[]
  /** Grows with every version: whoever saves says which one they have seen. */
  readonly revision: number
}

export async function findStoredTariff(db: OrgDb, id: TariffId): Promise<StoredTariff | null> {
  const head = await db.selectFrom('tariff').where('tariff.id', '=', id).selectAll('tariff').executeTakeFirst()
  if (!head) return null
  const rows = await db
    .selectFrom('tariff_version')
    .where('tariff_version.tariff_id', '=', id)
    .selectAll('tariff_version')
    .orderBy('tariff_version.effective_from')
    .orderBy('tariff_version.edition')
    .execute()
  const all = rows.map((row) => ({
    id: row.id,
    effectiveFrom: row.effective_from,
    edition: row.edition,
    reason: row.reason,
    createdAtMs: row.created_at_ms,
    version: { ...fromJson<TariffVersion>(row.version), effectiveFrom: row.effective_from },
    record: row.record === null ? null : fromJson<unknown>(row.record),
    source: row.source,
  }))
  const stored = all.filter((one, index) => all[index + 1]?.effectiveFrom !== one.effectiveFrom)
  return {
    id: head.id,
    name: head.name,
    tariff: { zone: head.zone, versions: stored.map((one) => one.version) },
    stored,
    corrected: all.filter((one) => !stored.includes(one)),
    revision: all.length,
  }
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
  /** 1 unless it corrects. */
  readonly edition?: number
  readonly reason?: string | null
  readonly version: TariffVersion
  readonly record: unknown
  readonly source: string
  readonly createdAtMs: number
}

export async function addTariffVersion(db: OrgTrx, fields: NewVersion): Promise<void> {
  const { actor } = db.scope
  await db
    .insertInto('tariff_version', {
      id: newId<TariffVersionId>(),
      tariff_id: fields.tariffId,
      effective_from: fields.effectiveFrom,
      edition: fields.edition ?? 1,
      version: toJson(fields.version),
      record: fields.record === null ? null : toJson(fields.record),
      source: fields.source,
      reason: fields.reason ?? null,
      person_id: actor.kind === 'person' ? actor.personId : null,
      created_at_ms: fields.createdAtMs,
    })
    .execute()
}
