/** Opens a visit for its electrician, or for the landlord. */
import { parseVisitId } from '#db/ids.ts'
import type { OrgDb } from '#db/org-db.ts'
import { findVisit, type Visit } from '#db/queries/visit.ts'
import { actingPerson, hasRole, requireRole } from '#lib/auth/permission.ts'
import { requireUnitAccess } from '#lib/hardware/record-hardware.server.ts'
import { notFound } from '#lib/http/app-error.ts'

export async function openVisit(db: OrgDb, id: unknown): Promise<Visit> {
  requireRole(db, ['electrician', 'landlord'], 'see visits')
  const visitId = parseVisitId(id)
  const visit = visitId && (await findVisit(db, visitId))
  if (!visit || (!hasRole(db, 'landlord') && visit.electricianId !== actingPerson(db))) throw notFound('visit')
  // Access that was taken away takes the visit with it.
  await requireUnitAccess(db, visit.unitId)
  return visit
}
