/** An electrician's visits, nearest due first, and one visit with everything needed at the enclosure. */
import type { OrgDb } from '#db/org-db.ts'
import { currentHardware } from '#db/queries/hardware.ts'
import { findProperty } from '#db/queries/property.ts'
import { listVisitsOf, type Visit } from '#db/queries/visit.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { blankInstallation } from '#lib/hardware/load-hardware-form.server.ts'
import { notFound } from '#lib/http/app-error.ts'
import { openVisit } from './open-visit.server.ts'

export async function loadVisits(db: OrgDb) {
  requireRole(db, ['electrician'], 'see visits')
  const personId = actingPerson(db)
  const visits = personId ? await listVisitsOf(db, personId) : []
  const byDue = (one: Visit, other: Visit) => (one.dueDay ?? '9999').localeCompare(other.dueDay ?? '9999')
  return {
    planned: visits.filter((visit) => visit.state === 'planned').sort(byDue),
    done: visits.filter((visit) => visit.state === 'done'),
  }
}

export async function loadVisit(db: OrgDb, id: unknown) {
  const visit = await openVisit(db, id)
  const property = await findProperty(db, visit.propertyId)
  if (!property) throw notFound('visit')
  const current = await currentHardware(db, visit.unitId)
  return {
    visit,
    address: property.address,
    profile: property.ruleProfile,
    installation: current?.installation ?? blankInstallation(property.supplyVoltageV),
    revision: current?.revision ?? 0,
  }
}
