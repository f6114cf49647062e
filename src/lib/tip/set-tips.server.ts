/** How often a tenant's tips come: their own choice, or the landlord's. */
import type { TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changeTenancyTips, findTenancy } from '#db/queries/tenancy.ts'
import { actingPerson, hasRole, requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { tipsSchema } from './schemas.ts'

export async function setTips(
  db: OrgDb,
  { tenancyId, input, nowMs }: { readonly tenancyId: TenancyId; readonly input: unknown; readonly nowMs: number },
): Promise<void> {
  requireRole(db, ['tenant', 'landlord'], 'choose tips')
  const { tips } = parseInput(tipsSchema, input)
  await inTransaction(db, async (trx) => {
    const tenancy = await findTenancy(trx, tenancyId)
    if (!tenancy || (!hasRole(db, 'landlord') && tenancy.personId !== actingPerson(db))) throw notFound('tenancy')
    await changeTenancyTips(trx, tenancyId, tips)
    await addAudit(trx, {
      atMs: nowMs,
      action: 'set',
      subjectKind: 'tips',
      subjectId: tenancyId,
      before: { tips: tenancy.tips },
      after: { tips },
    })
  })
}
