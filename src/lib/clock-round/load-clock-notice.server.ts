/** The next clock change as one line elsewhere: when it is, and how many switches wait for a visit. */
import type { OrgDb } from '#db/org-db.ts'
import type { Property } from '#db/queries/property.ts'
import { listVisitsOfProperty } from '#db/queries/visit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { roundUnits, visitsFor } from './load-round.server.ts'
import { causeOf, type Round, roundsOf } from './round.ts'

/** Earlier than this nobody plans for it. */
const NOTICE_MS = 42 * 86_400_000

export interface ClockNotice {
  readonly round: Round
  /** Visits of the round that are neither planned nor made. */
  readonly open: number
}

/** `null` when no change is near or no switch goes off with it. */
export async function loadClockNotice(
  db: OrgDb,
  { property, nowMs }: { readonly property: Property; readonly nowMs: number },
): Promise<ClockNotice | null> {
  requireRole(db, ['landlord'], 'plan a round')
  const [round] = roundsOf((await roundUnits(db, property)).units, { zone: property.zone, nowMs })
  if (!round || round.visits.length === 0 || round.change.atMs - nowMs > NOTICE_MS) return null
  const planned = visitsFor(await listVisitsOfProperty(db, property.id), causeOf(round.change))
  return { round, open: round.visits.filter(({ unit }) => !planned.has(unit.unitId)).length }
}
