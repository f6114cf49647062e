/** Reads and writes of digests; a row never changes, a correction is a new edition. */
import type { DigestId, PropertyId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'

export interface DigestDay {
  readonly day: string
  readonly energyKwh: number
  readonly peakKwh: number
  /** Units that needed hot water, and those of them that were warm on time. */
  readonly neededUnits?: number
  readonly warmUnits?: number
}
export interface DigestVisit {
  readonly code: string
  /** Day it is due, or was signed off; `null` = no day set. */
  readonly day: string | null
}

/**
 * One month of one property as it was accounted for; money in minor units of `currency`. An edition never changes, so a figure
 * that the product came to account for later is absent in older ones: it is optional, and nothing fills it in afterwards.
 */
export interface DigestFigures {
  readonly propertyName: string
  readonly currency: string
  readonly unitCount: number
  readonly unitDaysNeeded: number
  readonly unitDaysWarm: number
  readonly daysCovered: number
  readonly daysInMonth: number
  readonly energyKwh: number
  readonly peakKwh: number
  /** Of the unit-days that have a price; `null`: no tariff was in force. */
  readonly costMinor: number | null
  readonly pricedUnitDays?: number
  readonly computedUnitDays?: number
  readonly baselineEnergyKwh: number
  readonly baselineCostMinor: number | null
  /** Baseline energy of the unit-days that have a price: what `baselineCostMinor` pays for. */
  readonly pricedBaselineKwh?: number
  /** Always on less as run, over unit-days that were warm on time: what a cold shower did not get is not a saving. */
  readonly savedKwh?: number
  readonly savedMinor?: number | null
  /** Of `savedKwh`, what `savedMinor` is for. */
  readonly pricedSavedKwh?: number
  /** In order; the sums of the days are the totals above. */
  readonly days: readonly DigestDay[]
  /** Open at the start + raised − closed = open at the end. */
  readonly flagsOpenAtStart?: number
  readonly flagsRaised: number
  readonly flagsClosed: number
  readonly flagsOpen: readonly { readonly severity: string; readonly count: number }[]
  /** Unit codes only: no tenant's name, address or habits. */
  readonly worstUnits: readonly { readonly code: string; readonly coldDays: number; readonly worstShortfallMin: number }[]
  readonly visitsDone: number
  readonly visitsPlanned: number
  readonly signedOff?: readonly DigestVisit[]
  readonly planned?: readonly DigestVisit[]
  readonly feedbackHot: number
  readonly feedbackCold: number
}

export interface Digest {
  readonly id: DigestId
  readonly propertyId: PropertyId
  readonly month: string
  readonly edition: number
  readonly figures: DigestFigures
  readonly reason: string | null
  readonly createdAtMs: number
}

interface Row {
  readonly id: DigestId
  readonly property_id: PropertyId
  readonly month: string
  readonly edition: number
  readonly figures: string
  readonly reason: string | null
  readonly created_at_ms: number
}
const toDigest = (row: Row): Digest => ({
  id: row.id,
  propertyId: row.property_id,
  month: row.month,
  edition: row.edition,
  figures: fromJson<DigestFigures>(row.figures),
  reason: row.reason,
  createdAtMs: row.created_at_ms,
})

/** Newest month and edition first. */
export async function listDigests(db: OrgDb): Promise<readonly Digest[]> {
  const rows = await db.selectFrom('digest').selectAll('digest').orderBy('digest.month', 'desc').orderBy('digest.edition', 'desc').execute()
  return rows.map(toDigest)
}

export async function findDigest(db: OrgDb, id: DigestId): Promise<Digest | null> {
  const row = await db.selectFrom('digest').where('digest.id', '=', id).selectAll('digest').executeTakeFirst()
  return row ? toDigest(row) : null
}

export async function findLastEdition(db: OrgDb, propertyId: PropertyId, month: string): Promise<Digest | null> {
  const row = await db
    .selectFrom('digest')
    .where('digest.property_id', '=', propertyId)
    .where('digest.month', '=', month)
    .selectAll('digest')
    .orderBy('digest.edition', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ? toDigest(row) : null
}

export async function addDigest(db: OrgTrx, digest: Digest): Promise<void> {
  await db
    .insertInto('digest', {
      id: digest.id,
      property_id: digest.propertyId,
      month: digest.month,
      edition: digest.edition,
      figures: toJson(digest.figures),
      reason: digest.reason,
      created_at_ms: digest.createdAtMs,
    })
    .execute()
}
