/** Sets a tenancy's week of showers and evaluates the unit at once: the tenant for their own, the landlord for any. */
import type { TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addPreference } from '#db/queries/preference.ts'
import { findProperty } from '#db/queries/property.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { actingPerson, hasRole, requireRole } from '#lib/auth/permission.ts'
import { civilOf } from '#lib/core/time/civil.ts'
import { evaluateUnit, type UnitEvaluation } from '#lib/evaluation/evaluate-unit.server.ts'
import { notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { preferenceSchema } from './schemas.ts'

export interface SetPreference {
  readonly tenancyId: TenancyId
  readonly input: unknown
  readonly nowMs: number
}

export async function setPreference(db: OrgDb, { tenancyId, input, nowMs }: SetPreference): Promise<UnitEvaluation> {
  requireRole(db, ['tenant', 'landlord'], 'set showers')
  const { week, willing } = parseInput(preferenceSchema, input)
  const tenancy = await inTransaction(db, async (trx) => {
    const found = await findTenancy(trx, tenancyId)
    if (!found || (!hasRole(db, 'landlord') && found.personId !== actingPerson(db))) throw notFound('tenancy')
    const unit = await findUnit(trx, found.unitId)
    const property = unit && (await findProperty(trx, unit.propertyId))
    if (!property || (found.toDay !== null && found.toDay <= civilOf(nowMs, property.zone).day)) throw notFound('tenancy')
    const setBy = actingPerson(db)
    await addPreference(trx, { tenancyId, week, willing, setBy, setAtMs: nowMs })
    // What a tenant entered about showers is personal: the audit says that it changed, not to what.
    await addAudit(trx, { atMs: nowMs, action: 'set', subjectKind: 'preference', subjectId: tenancyId })
    return found
  })
  return evaluateUnit(db, { unitId: tenancy.unitId, nowMs })
}
