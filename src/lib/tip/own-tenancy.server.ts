/** A tenant's own tenancies, each with its unit and building. One that is over opens nothing: the unit is somebody else's now. */
import { parseTenancyId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findProperty, type Property } from '#db/queries/property.ts'
import { listTenanciesOfPerson, type Tenancy } from '#db/queries/tenancy.ts'
import { findUnit, type Unit } from '#db/queries/unit.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { notFound } from '#lib/http/app-error.ts'

export interface Home {
  readonly tenancy: Tenancy
  readonly unit: Unit
  readonly property: Property
  /** The property's local day now. */
  readonly today: string
}

/** Those that run or are to begin, in order of their first day, and those that are over, the last first. */
export async function ownTenancies(db: OrgDb, nowMs: number): Promise<{ readonly open: readonly Home[]; readonly over: readonly Home[] }> {
  requireRole(db, ['tenant'], 'see a tenant’s card')
  const personId = actingPerson(db)
  const homes: Home[] = []
  for (const tenancy of personId ? await listTenanciesOfPerson(db, personId) : []) {
    const unit = await findUnit(db, tenancy.unitId)
    const property = unit && (await findProperty(db, unit.propertyId))
    if (unit && property) homes.push({ tenancy, unit, property, today: civilOf(nowMs, property.zone).day })
  }
  return { open: homes.filter((home) => !isOver(home)).reverse(), over: homes.filter(isOver) }
}

const isOver = ({ tenancy, today }: Home): boolean => tenancy.toDay !== null && tenancy.toDay <= today

export interface TenancyChoice {
  /** From a form or an address; `null` = the one that runs. */
  readonly tenancyId: unknown
  readonly nowMs: number
}

/** The tenancy a tenant acts on; `not-found` for a neighbour's, another organisation's, and one that is over. */
export async function openTenancy(
  db: OrgDb,
  { tenancyId, nowMs }: TenancyChoice,
): Promise<Home & { /** Leads back to this one's card; empty for whoever has no other. */ readonly cardQuery: string }> {
  const { open } = await ownTenancies(db, nowMs)
  const id = tenancyId ? parseTenancyId(tenancyId) : null
  const home = tenancyId ? open.find(({ tenancy }) => tenancy.id === id) : open[0]
  if (!home) throw notFound('tenancy of yours')
  return { ...home, cardQuery: open.length > 1 ? `?tenancy=${home.tenancy.id}` : '' }
}
