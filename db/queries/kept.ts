/** What is personal about a tenancy's showers, wherever it is kept: counted, listed, and taken out. */
import { sql } from 'kysely'
import type { FlagId, PersonId, PropertyId, TenancyId, UnitId } from '../ids.ts'
import { fromJson, toJson } from '../json.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { FlagEvidence } from './flag.ts'
import type { Preference } from './preference.ts'

/** A tenancy as far as its traces are found by it. */
export interface Traces {
  readonly tenancyId: TenancyId
  readonly unitId: UnitId
  readonly propertyId: PropertyId
  readonly email: string
  /** Local days `[fromDay, toDay)`; what is computed of them is computed from this tenant's showers. */
  readonly fromDay: string
  readonly toDay: string
  /** The same days as instants, `[fromMs, toMs)`. */
  readonly fromMs: number
  readonly toMs: number
}

/** Mails that name a tenant's times. */
const MAILS_ABOUT_SHOWERS = ['tip', 'schedule-changed', 'clock-change'] as const
/** Findings that quote what a tenant wants or said. */
const FLAGS_ABOUT_SHOWERS = ['misses-recovery', 'model-disagrees'] as const

export interface KeptWeek {
  readonly setAtMs: number
  readonly setBy: PersonId | null
  readonly week: Preference['week']
  readonly willing: Preference['willing']
}

/** Every week a tenancy was given, newest first. */
export async function listWeeks(db: OrgDb, tenancyId: TenancyId): Promise<readonly KeptWeek[]> {
  const rows = await db
    .selectFrom('preference')
    .where('preference.tenancy_id', '=', tenancyId)
    .select(['preference.set_at_ms', 'preference.set_by', 'preference.week', 'preference.willing'])
    .orderBy('preference.set_at_ms', 'desc')
    .execute()
  return rows.map((row) => ({
    setAtMs: row.set_at_ms,
    setBy: row.set_by,
    week: fromJson<KeptWeek['week']>(row.week),
    willing: fromJson<KeptWeek['willing']>(row.willing),
  }))
}

/** Mails about a tenancy's showers, newest first. */
export async function listShowerMails(db: OrgDb, { email, unitId, fromMs, toMs }: Traces) {
  const rows = await db
    .selectFrom('message')
    .where('message.to_email', '=', email.toLowerCase())
    .where('message.unit_id', '=', unitId)
    .where('message.kind', 'in', MAILS_ABOUT_SHOWERS)
    .where('message.queued_at_ms', '>=', fromMs - DAY_MS)
    .where('message.queued_at_ms', '<', toMs)
    .select(['message.queued_at_ms', 'message.subject', 'message.state'])
    .orderBy('message.queued_at_ms', 'desc')
    .execute()
  return rows.map((row) => ({ queuedAtMs: row.queued_at_ms, subject: row.subject, state: row.state }))
}

const DAY_MS = 86_400_000

/** Takes out what a tenancy entered and what repeats it. Figures of energy and cost, and whether a day was warm, stay. */
export async function removeTraces(db: OrgTrx, traces: Traces): Promise<void> {
  const { tenancyId, unitId, email, fromDay, toDay, fromMs, toMs } = traces
  await db.deleteFrom('preference').where('tenancy_id', '=', tenancyId).execute()
  await db.deleteFrom('feedback').where('tenancy_id', '=', tenancyId).execute()
  await db.deleteFrom('calendar_feed').where('tenancy_id', '=', tenancyId).execute()
  await db.deleteFrom('plan_start').where('tenancy_id', '=', tenancyId).execute()
  await db
    .deleteFrom('message')
    .where('to_email', '=', email.toLowerCase())
    .where('unit_id', '=', unitId)
    .where('kind', 'in', MAILS_ABOUT_SHOWERS)
    // A day early: the first tip goes out on the eve. One that a worker has just claimed is that worker's.
    .where('queued_at_ms', '>=', fromMs - DAY_MS)
    .where('queued_at_ms', '<', toMs)
    .where('state', '!=', 'sending')
    .execute()
  await forgetTimes(db, { unitId, fromDay, toDay })
  await db
    .updateTable('audit_entry', { before: null, after: null })
    .where('subject_kind', '=', 'feedback')
    .where('subject_id', '=', tenancyId)
    .execute()
  const flags = await db
    .selectFrom('flag')
    .where('flag.unit_id', '=', unitId)
    .where('flag.kind', 'in', FLAGS_ABOUT_SHOWERS)
    .where('flag.opened_at_ms', '<', toMs)
    .where('flag.seen_at_ms', '>=', fromMs)
    .select(['flag.id', 'flag.evidence'])
    .execute()
  await redactFlags(db, flags)
}

/** Days keep their verdict and their energy; when somebody showered is forgotten. */
async function forgetTimes(
  db: OrgTrx,
  { unitId, fromDay, toDay }: { readonly unitId: UnitId; readonly fromDay: string; readonly toDay: string },
): Promise<void> {
  await db
    .updateTable('evaluation', { ready_by_min: null, start_by_min: null })
    .set({ outcome: sql<string>`json_set(outcome, '$.needs', json('[]'), '$.runs', json('[]'), '$.charge', null)` })
    .where('unit_id', '=', unitId)
    .where('day', '>=', fromDay)
    .where('day', '<', toDay)
    .where('ready_by_min', 'is not', null)
    .execute()
  await db
    .deleteFrom('run')
    .where('unit_id', '=', unitId)
    .where('kind', '=', 'expected')
    .where('day', '>=', fromDay)
    .where('day', '<', toDay)
    .execute()
}

/** A finding keeps its kind, its days and its shortfall; the words that quote a shower go. */
async function redactFlags(db: OrgTrx, flags: readonly { readonly id: FlagId; readonly evidence: string }[]): Promise<void> {
  for (const { id, evidence } of flags) {
    const { shortfallMin } = fromJson<FlagEvidence>(evidence)
    const summary = shortfallMin === null ? 'Did not serve what was wanted' : `${shortfallMin} min short`
    const redacted: FlagEvidence = {
      shortfallMin,
      day: null,
      lines: [{ kind: 'found', label: 'Figures', value: 'deleted at the tenant’s request', from: 'computed' }],
    }
    await db
      .updateTable('flag', { summary, evidence: toJson(redacted) })
      .where('id', '=', id)
      .execute()
  }
}
