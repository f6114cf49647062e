/** Opens a property to an electrician or an owner who is a member already. */
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addAccess } from '#db/queries/organisation.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { type AccessFields, ownedAccess } from './access-target.server.ts'

export async function giveAccess(db: OrgDb, { nowMs, ...fields }: AccessFields & { readonly nowMs: number }): Promise<void> {
  requireRole(db, ['landlord'], 'open properties to people')
  await inTransaction(db, async (trx) => {
    const access = await ownedAccess(trx, fields)
    await addAccess(trx, access, nowMs)
    const { personId, propertyId, role } = access
    await addAudit(trx, { atMs: nowMs, action: 'give-access', subjectKind: 'member', subjectId: personId, after: { propertyId, role } })
  })
}
