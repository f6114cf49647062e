/** Closes a property to an electrician or an owner; they stay a member and keep the others. */
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { deleteAccess } from '#db/queries/organisation.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { type AccessFields, ownedAccess } from './access-target.server.ts'

export async function takeAccess(db: OrgDb, { nowMs, ...fields }: AccessFields & { readonly nowMs: number }): Promise<void> {
  requireRole(db, ['landlord'], 'close properties to people')
  await inTransaction(db, async (trx) => {
    const access = await ownedAccess(trx, fields)
    await deleteAccess(trx, access)
    const { personId, propertyId, role } = access
    await addAudit(trx, { atMs: nowMs, action: 'take-access', subjectKind: 'member', subjectId: personId, before: { propertyId, role } })
  })
}
