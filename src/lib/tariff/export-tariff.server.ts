/** A version of a property's tariff as an open URDB JSON record: as it was imported, or written anew where it was entered here. */
import type { OrgDb } from '#db/org-db.ts'
import type { Property } from '#db/queries/property.ts'
import { findStoredTariff } from '#db/queries/tariff.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { versionOn } from '#lib/core/tariff/price.ts'
import { writeUrdb } from '#lib/core/tariff/urdb-export.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'

export interface ExportTariff {
  readonly property: Property
  /** First day of the version; `null` = the one in force. */
  readonly from: string | null
  readonly nowMs: number
}

export async function exportTariff(db: OrgDb, { property, from, nowMs }: ExportTariff) {
  requireRole(db, ['landlord'], 'export tariffs')
  const stored = property.tariffId ? await findStoredTariff(db, property.tariffId) : null
  const wanted = from ?? (stored && versionOn(stored.tariff, civilOf(nowMs, property.zone).day)?.effectiveFrom)
  const found = stored?.stored.find((one) => one.effectiveFrom === wanted)
  if (!found) throw notFound('rate record')
  return { effectiveFrom: found.effectiveFrom, record: found.record ?? writeUrdb(found.version).record }
}
