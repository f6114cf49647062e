/** Ends a tenancy on a day; the day itself is already without the tenant. */
import type { TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changeTenancyEnd, findTenancy, listTenancies } from '#db/queries/tenancy.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { evaluateUnit } from '#lib/evaluation/evaluate-unit.server.ts'
import { invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
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
    if (toDay <= found.fromDay) throw invalid([{ field: 'toDay', message: `It began on ${found.fromDay}: choose a later day.` }])
    const next = (await listTenancies(trx, found.unitId)).filter((other) => other.fromDay > found.fromDay).at(-1)
    if (next && toDay > next.fromDay) {
      throw invalid([{ field: 'toDay', message: `The next tenancy begins on ${next.fromDay}: choose that day or an earlier one.` }])
    }
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
