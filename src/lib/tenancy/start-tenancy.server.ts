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
import { handOver } from './hand-over.ts'
import { tenancySchema } from './schemas.ts'

export async function startTenancy(
  db: OrgDb,
  { unitId, input, nowMs }: { readonly unitId: UnitId; readonly input: unknown; readonly nowMs: number },
): Promise<TenancyId> {
  requireRole(db, ['landlord'], 'start tenancies')
  const fields = parseInput(tenancySchema, input)
  const id = await inTransaction(db, async (trx) => {
    if (!(await findUnit(trx, unitId))) throw notFound('unit')
    const fit = handOver(await listTenancies(trx, unitId), fields.fromDay)
    if (fit.status === 'refused') throw invalid([{ field: 'fromDay', message: fit.reason }])
    if (fit.ends) await changeTenancyEnd(trx, fit.ends.id, fields.fromDay)
    const tenancyId = await addTenancy(trx, { unitId, personId: null, ...fields, toDay: null }, nowMs)
    await addAudit(trx, {
      atMs: nowMs,
      action: 'start',
      subjectKind: 'tenancy',
      subjectId: tenancyId,
      after: { fromDay: fields.fromDay, ended: fit.ends?.id ?? null },
    })
    return tenancyId
  })
  await evaluateUnit(db, { unitId, nowMs })
  return id
}
