/** Starts a tenancy; whoever lived there before moves out on the same day, and the new tenant sees nothing of theirs. */
import type { TenancyId, UnitId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addTenancy, changeTenancyEnd, listTenancies } from '#db/queries/tenancy.ts'
import { findUnit } from '#db/queries/unit.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { tenancySchema } from './schemas.ts'

export async function startTenancy(
  db: OrgDb,
  { unitId, input, nowMs }: { readonly unitId: UnitId; readonly input: unknown; readonly nowMs: number },
): Promise<TenancyId> {
  requireRole(db, ['landlord'], 'start tenancies')
  const fields = parseInput(tenancySchema, input)
  const id = await inTransaction(db, async (trx) => {
    if (!(await findUnit(trx, unitId))) throw notFound('unit')
    const [newest] = await listTenancies(trx, unitId)
    if (newest && (newest.toDay === null || newest.toDay > fields.fromDay)) {
      if (fields.fromDay <= newest.fromDay)
        throw invalid([{ field: 'fromDay', message: `The tenancy before began on ${newest.fromDay}. Choose a later day.` }])
      await changeTenancyEnd(trx, newest.id, fields.fromDay)
    }
    const tenancyId = await addTenancy(trx, { unitId, personId: null, ...fields, toDay: null }, nowMs)
    await addAudit(trx, { atMs: nowMs, action: 'start', subjectKind: 'tenancy', subjectId: tenancyId, after: { fromDay: fields.fromDay } })
    return tenancyId
  })
  await evaluateUnit(db, { unitId, nowMs })
  return id
}
