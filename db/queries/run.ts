/** Reads and writes of runs: expected by the computation, planned, or measured. */
import type { PropertyId, RunId, UnitId } from '../ids.ts'
import type { OrgDb, OrgTrx } from '../org-db.ts'
import type { RunRow, RunTable } from '../tables/run.ts'

export interface Run {
  readonly id: RunId
  readonly propertyId: PropertyId
  readonly unitId: UnitId
  /** The local day it serves. */
  readonly day: string
  readonly kind: RunTable['kind']
  readonly startsAtMs: number
  readonly endsAtMs: number
  /** End at its longest; `null` = it may never end. */
  readonly longestEndsAtMs: number | null
  readonly windowStartsAtMs: number
  readonly windowEndsAtMs: number
  readonly readyByAtMs: number
  readonly powerW: number
  readonly short: boolean
}

const toRun = (row: RunRow): Run => ({
  id: row.id,
  propertyId: row.property_id,
  unitId: row.unit_id,
  day: row.day,
  kind: row.kind,
  startsAtMs: row.starts_at_ms,
  endsAtMs: row.ends_at_ms,
  longestEndsAtMs: row.longest_ends_at_ms,
  windowStartsAtMs: row.window_starts_at_ms,
  windowEndsAtMs: row.window_ends_at_ms,
  readyByAtMs: row.ready_by_at_ms,
  powerW: row.power_w,
  short: row.short === 1,
})

/** A run that may never end is looked for this far back; it is open-ended, so the bound only keeps the index useful. */
const LOOK_BACK_MS = 2 * 86_400_000

/** Expected runs of a property that touch `[fromMs, toMs)`, in order of their start. */
export async function listExpectedRuns(db: OrgDb, propertyId: PropertyId, fromMs: number, toMs: number): Promise<readonly Run[]> {
  const rows = await db
    .selectFrom('run')
    .where('run.property_id', '=', propertyId)
    .where('run.kind', '=', 'expected')
    .where('run.starts_at_ms', '>=', fromMs - LOOK_BACK_MS)
    .where('run.starts_at_ms', '<', toMs)
    .where((eb) =>
      eb.or([eb('run.ends_at_ms', '>', fromMs), eb('run.longest_ends_at_ms', 'is', null), eb('run.longest_ends_at_ms', '>', fromMs)]),
    )
    .selectAll('run')
    .orderBy('run.starts_at_ms')
    .orderBy('run.id')
    .execute()
  return rows.map(toRun)
}

/** A unit's expected runs for days `[fromDay, toDay)`. */
export async function listUnitRuns(db: OrgDb, unitId: UnitId, fromDay: string, toDay: string): Promise<readonly Run[]> {
  const rows = await db
    .selectFrom('run')
    .where('run.unit_id', '=', unitId)
    .where('run.kind', '=', 'expected')
    .where('run.day', '>=', fromDay)
    .where('run.day', '<', toDay)
    .selectAll('run')
    .orderBy('run.starts_at_ms')
    .execute()
  return rows.map(toRun)
}

/** Takes out the expected runs of these units for days `[fromDay, toDay)`, before new ones are written. */
export async function removeExpectedRuns(db: OrgTrx, unitIds: readonly UnitId[], fromDay: string, toDay: string): Promise<void> {
  if (unitIds.length === 0) return
  await db
    .deleteFrom('run')
    .where('unit_id', 'in', unitIds)
    .where('kind', '=', 'expected')
    .where('day', '>=', fromDay)
    .where('day', '<', toDay)
    .execute()
}

/** Moves the expected runs of a need to another start, as long as before; a run that is no longer there moves nothing. */
export async function moveExpectedRun(
  db: OrgTrx,
  need: { readonly unitId: UnitId; readonly day: string; readonly readyByAtMs: number },
  startsAtMs: number,
): Promise<void> {
  const rows = await db
    .selectFrom('run')
    .where('run.unit_id', '=', need.unitId)
    .where('run.day', '=', need.day)
    .where('run.kind', '=', 'expected')
    .where('run.ready_by_at_ms', '=', Math.round(need.readyByAtMs))
    .select(['run.id', 'run.starts_at_ms', 'run.ends_at_ms', 'run.longest_ends_at_ms'])
    .execute()
  for (const row of rows) {
    const laterMs = Math.round(startsAtMs) - row.starts_at_ms
    const longest = row.longest_ends_at_ms === null ? null : row.longest_ends_at_ms + laterMs
    const moved = { starts_at_ms: row.starts_at_ms + laterMs, ends_at_ms: row.ends_at_ms + laterMs, longest_ends_at_ms: longest }
    await db.updateTable('run', moved).where('id', '=', row.id).execute()
  }
}

export async function addRun(db: OrgTrx, run: Run): Promise<void> {
  await db
    .insertInto('run', {
      id: run.id,
      property_id: run.propertyId,
      unit_id: run.unitId,
      day: run.day,
      kind: run.kind,
      starts_at_ms: Math.round(run.startsAtMs),
      ends_at_ms: Math.round(run.endsAtMs),
      longest_ends_at_ms: run.longestEndsAtMs === null ? null : Math.round(run.longestEndsAtMs),
      window_starts_at_ms: Math.round(run.windowStartsAtMs),
      window_ends_at_ms: Math.round(run.windowEndsAtMs),
      ready_by_at_ms: Math.round(run.readyByAtMs),
      power_w: run.powerW,
      short: run.short ? 1 : 0,
    })
    .execute()
}
