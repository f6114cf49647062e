/** Visits, nearest due first, building by building; and one visit with everything needed at the enclosure. */
import type { PersonId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { listAccess, listMembers } from '#db/queries/organisation.ts'
import { findProperty } from '#db/queries/property.ts'
import { listVisits, listVisitsOf, type Visit } from '#db/queries/visit.ts'
import { actingPerson, hasRole, requireRole } from '#lib/auth/permission.ts'
import { loadHardwareForm } from '#lib/hardware/load-hardware-form.server.ts'
import { notFound } from '#lib/http/app-error.ts'
import { openVisit } from './open-visit.server.ts'
import { byBuilding } from './view.ts'

/** An electrician sees their own, at properties that are open to them; the landlord sees everybody's and who comes. */
export async function loadVisits(db: OrgDb) {
  requireRole(db, ['electrician', 'landlord'], 'see visits')
  const landlord = hasRole(db, 'landlord')
  const visits = landlord ? await listVisits(db) : await ownVisits(db)
  const names: ReadonlyMap<PersonId, string> = new Map(
    landlord ? (await listMembers(db)).map((member) => [member.personId, member.name]) : [],
  )
  const planned = visits.filter((visit) => visit.state === 'planned')
  return {
    plannedCount: planned.length,
    buildings: byBuilding(planned),
    done: visits.filter((visit) => visit.state === 'done').sort((one, other) => (other.doneAtMs ?? 0) - (one.doneAtMs ?? 0)),
    /** Who comes; only for whoever sends them. */
    names,
  }
}

async function ownVisits(db: OrgDb): Promise<readonly Visit[]> {
  const personId = actingPerson(db)
  if (!personId) return []
  const access = (await listAccess(db)).filter((one) => one.role === 'electrician' && one.personId === personId)
  const reachable = new Set(access.map((one) => one.propertyId))
  return (await listVisitsOf(db, personId)).filter((visit) => reachable.has(visit.propertyId))
}

export async function loadVisit(db: OrgDb, id: unknown) {
  const visit = await openVisit(db, id)
  const property = await findProperty(db, visit.propertyId)
  if (!property) throw notFound('visit')
  const form = await loadHardwareForm(db, { property, code: visit.unitCode })
  return { visit, address: property.address, profile: property.ruleProfile, form }
}
