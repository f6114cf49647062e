/** Deletes what a tenancy entered about showers, and what repeats it: the tenant for their own, past ones too; the landlord for any, on request. */
import type { TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { removeTraces } from '#db/queries/kept.ts'
import { findProperty } from '#db/queries/property.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { actingPerson, hasRole, requireRole } from '#lib/auth/permission.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { notFound } from '#lib/http/app-error.ts'
import { tracesOf } from './traces.ts'

export async function eraseEntries(
  db: OrgDb,
  { tenancyId, nowMs }: { readonly tenancyId: TenancyId; readonly nowMs: number },
): Promise<void> {
  requireRole(db, ['tenant', 'landlord'], 'delete what a tenant entered')
  const unitId = await inTransaction(db, async (trx) => {
    const tenancy = await findTenancy(trx, tenancyId)
    if (!tenancy || (!hasRole(db, 'landlord') && tenancy.personId !== actingPerson(db))) throw notFound('tenancy')
    const unit = await findUnit(trx, tenancy.unitId)
    const property = unit && (await findProperty(trx, unit.propertyId))
    if (!property) throw notFound('tenancy')
    await removeTraces(trx, tracesOf({ tenancy, property, nowMs }))
    await addAudit(trx, { atMs: nowMs, action: 'erase', subjectKind: 'preference', subjectId: tenancyId })
    return tenancy.unitId
  })
  // Without showers nothing is computed of the days ahead, and flags that stood on them close.
  await evaluateUnit(db, { unitId, nowMs })
}
