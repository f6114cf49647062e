/** What the week grid opens with: a version as a draft, what is stored beside it, and the load to try it on. */
import type { OrgDb } from '#db/org-db.ts'
import { listEvaluations } from '#db/queries/evaluation.ts'
import type { Property } from '#db/queries/property.ts'
import { listExpectedRuns } from '#db/queries/run.ts'
import { findStoredTariff, type StoredTariff } from '#db/queries/tariff.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { versionOn } from '#lib/core/tariff/price.ts'
import type { TariffVersion } from '#lib/core/tariff/types.ts'
import { addDays, addMonths, civilOf, dayBounds, monthOf } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'
import { blankDraft, type Draft, draftOf } from './draft.ts'
import { minorPerMajorOf } from './money.ts'
import { type HeatingWeek, weekOf } from './month-load.ts'

const DAYS_A_WEEK = 7

export interface EditorData {
  readonly draft: Draft
  readonly revision: number
  /** As stored, oldest first. */
  readonly versions: readonly TariffVersion[]
  readonly zone: string
  readonly today: string
  readonly baseLoadW: number
  /** `null`: no runs are computed. */
  readonly week: HeatingWeek | null
}

/** `from` names the version to begin with; without it, the one in force, or an empty one. */
export async function loadEditor(
  db: OrgDb,
  { property, from, nowMs }: { readonly property: Property; readonly from: string | null; readonly nowMs: number },
): Promise<EditorData> {
  requireRole(db, ['landlord'], 'change tariffs')
  const stored = property.tariffId ? await findStoredTariff(db, property.tariffId) : null
  const { day: today } = civilOf(nowMs, property.zone)
  return {
    draft: draftFor(stored, { property, from, today }),
    revision: stored?.revision ?? 0,
    versions: stored?.tariff.versions ?? [],
    zone: property.zone,
    today,
    baseLoadW: property.baseLoadW,
    week: await expectedWeek(db, property, today),
  }
}

/** The stored versions and their count, for whoever has to look again. */
export async function loadVersions(db: OrgDb, property: Property) {
  requireRole(db, ['landlord'], 'see tariffs')
  const stored = property.tariffId ? await findStoredTariff(db, property.tariffId) : null
  return { revision: stored?.revision ?? 0, versions: stored?.tariff.versions ?? [] }
}

interface DraftCase {
  readonly property: Property
  readonly from: string | null
  readonly today: string
}

function draftFor(stored: StoredTariff | null, { property, from, today }: DraftCase): Draft {
  const nextMonth = `${addMonths(monthOf(today), 1)}-01`
  const { currency } = property
  if (from !== null) {
    const wanted = stored?.tariff.versions.find((one) => one.effectiveFrom === from)
    if (!wanted) throw notFound('version')
    return draftOf(wanted)
  }
  const current = stored && (versionOn(stored.tariff, today) ?? stored.tariff.versions[0])
  return current
    ? { ...draftOf(current), effectiveFrom: freeDay(stored, nextMonth) }
    : blankDraft({ effectiveFrom: today, currency, minorPerMajor: minorPerMajorOf(currency) })
}

/** The first of the next month that has no version yet. */
function freeDay(stored: StoredTariff, day: string): string {
  return stored.tariff.versions.some((one) => one.effectiveFrom === day) ? freeDay(stored, `${addMonths(monthOf(day), 1)}-01`) : day
}

async function expectedWeek(db: OrgDb, property: Property, day: string): Promise<HeatingWeek | null> {
  const toDay = addDays(day, DAYS_A_WEEK)
  const { zone } = property
  const runs = await listExpectedRuns(db, property.id, dayBounds(day, zone).startsAtMs, dayBounds(toDay, zone).startsAtMs)
  if (runs.length === 0) return null
  return weekOf({ zone, runs, evaluations: await listEvaluations(db, property.id, day, toDay) })
}
