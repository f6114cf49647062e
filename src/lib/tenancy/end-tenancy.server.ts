/** Ends a tenancy on a day; the day itself is already without the tenant. */
import type { TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changeTenancyEnd, findTenancy, listTenancies } from '#db/queries/tenancy.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { endRefusal } from './hand-over.ts'
import { endSchema } from './schemas.ts'

export async function endTenancy(
  db: OrgDb,
  { tenancyId, input, nowMs }: { readonly tenancyId: TenancyId; readonly input: unknown; readonly nowMs: number },
): Promise<void> {
  requireRole(db, ['landlord'], 'end tenancies')
  const { toDay } = parseInput(endSchema, input)
  const tenancy = await inTransaction(db, async (trx) => {
    const found = await findTenancy(trx, tenancyId)
    if (!found) throw notFound('tenancy')
    const refusal = endRefusal(await listTenancies(trx, found.unitId), found, toDay)
    if (refusal) throw invalid([{ field: 'toDay', message: refusal }])
    await changeTenancyEnd(trx, tenancyId, toDay)
    await addAudit(trx, {
      atMs: nowMs,
      action: 'end',
      subjectKind: 'tenancy',
      subjectId: tenancyId,
      before: { toDay: found.toDay },
      after: { toDay },
    })
    return found
  })
  await evaluateUnit(db, { unitId: tenancy.unitId, nowMs })
}
