/** What the Flags page shows: the open queue, planned visits, who can be sent, and the history. */
import type { FlagKind } from '#db/enums.ts'
import type { UnitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { type Flag, listClosedFlags, listOpenFlags, listPlannedVisits, type PlannedVisit } from '#db/queries/flag.ts'
import { listAccess, listMembers } from '#db/queries/organisation.ts'
import { findPropertyBySlug } from '#db/queries/property.ts'
import { listUnits } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'
import { flagKindSchema } from './schemas.ts'
import { byUrgency } from './view.ts'

/** Older history is in the audit log. */
const HISTORY_LIMIT = 100

export interface FlagItem {
  readonly flag: Flag
  /** `null`: the whole building. */
  readonly unitCode: string | null
  readonly visit: PlannedVisit | null
}

export async function loadFlags(db: OrgDb, asked: { readonly propertySlug: string; readonly kind: string | null; readonly nowMs: number }) {
  requireRole(db, ['landlord'], 'work the flags')
  const property = await findPropertyBySlug(db, asked.propertySlug)
  if (!property) throw notFound('property')
  const open = await listOpenFlags(db, { propertyId: property.id })
  const closed = await listClosedFlags(db, { propertyId: property.id, limit: HISTORY_LIMIT })
  const codes = new Map<UnitId, string>((await listUnits(db, property.id)).map((unit) => [unit.id, unit.code]))
  const visits = new Map((await listPlannedVisits(db, property.id)).map((visit) => [visit.flagId, visit]))
  const access = await listAccess(db)
  const members = await listMembers(db)
  const item = (flag: Flag): FlagItem => ({
    flag,
    unitCode: flag.unitId ? (codes.get(flag.unitId) ?? null) : null,
    visit: visits.get(flag.id) ?? null,
  })
  const kind: FlagKind | null = flagKindSchema.safeParse(asked.kind).data ?? null
  const queue = [...open].sort(byUrgency)
  return {
    property,
    today: civilOf(asked.nowMs, property.zone).day,
    kind,
    counts: countByKind(open),
    dangerous: open.filter((flag) => flag.severity === 'dangerous').length,
    total: open.length,
    open: queue.filter((flag) => kind === null || flag.kind === kind).map(item),
    closed: closed.filter((flag) => kind === null || flag.kind === kind).map(item),
    electricians: members
      .filter(
        (member) =>
          member.role === 'electrician' &&
          access.some((one) => one.role === 'electrician' && one.personId === member.personId && one.propertyId === property.id),
      )
      .map(({ personId, name }) => ({ personId, name })),
    nameOf: new Map(members.map((member) => [member.personId, member.name])),
  }
}

export type FlagsPage = Awaited<ReturnType<typeof loadFlags>>

function countByKind(flags: readonly Flag[]): ReadonlyMap<FlagKind, number> {
  const counts = new Map<FlagKind, number>()
  for (const { kind } of flags) counts.set(kind, (counts.get(kind) ?? 0) + 1)
  return counts
}
