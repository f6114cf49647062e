/** What the tariff page shows: the version in force, its week in bands, demand and fixed charges in words. */
import type { OrgDb } from '#db/org-db.ts'
import type { Property } from '#db/queries/property.ts'
import { findStoredTariff } from '#db/queries/tariff.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { versionOn } from '#lib/core/tariff/price.ts'
import { tariffView } from './view.ts'

export async function loadTariff(db: OrgDb, property: Property, nowMs: number) {
  const stored = property.tariffId ? await findStoredTariff(db, property.tariffId) : null
  if (!stored) return null
  const { day } = civilOf(nowMs, property.zone)
  const current = versionOn(stored.tariff, day)
  return {
    name: stored.name,
    versions: stored.stored.map((one) => ({
      effectiveFrom: one.effectiveFrom,
      source: one.source,
      inForce: one.version.effectiveFrom === current?.effectiveFrom,
    })),
    current: current && tariffView(current, day),
    record: stored.stored.find((one) => one.effectiveFrom === current?.effectiveFrom)?.record ?? null,
  }
}
