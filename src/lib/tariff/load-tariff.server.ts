/** What the tariff page shows: the version in force, its week in bands, what of it is not billed, and what a month would come to. */
import type { OrgDb } from '#db/org-db.ts'
import { listEvaluations } from '#db/queries/evaluation.ts'
import type { Property } from '#db/queries/property.ts'
import { listExpectedRuns } from '#db/queries/run.ts'
import { findStoredTariff, type StoredVersion } from '#db/queries/tariff.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { billMonth } from '#lib/core/tariff/bill.ts'
import { versionOn } from '#lib/core/tariff/price.ts'
import { writeUrdb } from '#lib/core/tariff/urdb-export.ts'
import { readUrdb } from '#lib/core/tariff/urdb-import.ts'
import { addDays, civilOf, dayBounds, monthOf } from '#lib/core/time/civil.ts'
import { billView } from './bill-view.ts'
import { differencesOf } from './differences.ts'
import { monthLoad } from './month-load.ts'
import { tariffView } from './view.ts'

const DAYS_A_WEEK = 7

export async function loadTariff(db: OrgDb, property: Property, nowMs: number) {
  requireRole(db, ['landlord'], 'see tariffs')
  const stored = property.tariffId ? await findStoredTariff(db, property.tariffId) : null
  if (!stored) return null
  const { day } = civilOf(nowMs, property.zone)
  const current = versionOn(stored.tariff, day)
  const now = stored.stored.find((one) => one.effectiveFrom === current?.effectiveFrom) ?? null
  const load = await expectedMonth(db, { property, day })
  return {
    name: stored.name,
    versions: stored.stored.map((one) => ({
      effectiveFrom: one.effectiveFrom,
      source: one.source,
      reason: one.reason,
      notCarried: one.record === null ? writeUrdb(one.version).notCarried : [],
      inForce: one.version.effectiveFrom === current?.effectiveFrom,
      corrected: stored.corrected
        .filter((other) => other.effectiveFrom === one.effectiveFrom)
        .map((other) => ({ source: other.source, enteredAtMs: other.createdAtMs, changes: differencesOf(other.version, one.version) })),
    })),
    current: current && tariffView(current, day),
    warnings: now ? warningsOf(now) : [],
    bill: load && billView(billMonth(stored.tariff, monthOf(day), load), property.currency),
  }
}

/** What importing it said; a version that was entered here has no record to ask. */
function warningsOf({ record, version, effectiveFrom }: StoredVersion): readonly string[] {
  if (record === null) return []
  const { currency, minorPerMajor } = version
  const outcome = readUrdb(record, { currency, minorPerMajor, effectiveFrom })
  return outcome.status === 'read' ? outcome.warnings : []
}

async function expectedMonth(db: OrgDb, { property, day }: { readonly property: Property; readonly day: string }) {
  const toDay = addDays(day, DAYS_A_WEEK)
  const runs = await listExpectedRuns(db, property.id, dayBounds(day, property.zone).startsAtMs, dayBounds(toDay, property.zone).startsAtMs)
  if (runs.length === 0) return null
  const evaluations = await listEvaluations(db, property.id, day, toDay)
  return monthLoad({ month: monthOf(day), zone: property.zone, baseLoadW: property.baseLoadW, runs, evaluations })
}
