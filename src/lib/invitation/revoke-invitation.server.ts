/** Revokes an open invitation; its link stops working at once. */
import { parseInvitationId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { revokeInvitation as revoke } from '#db/queries/organisation.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'

export async function revokeInvitation(
  db: OrgDb,
  { invitationId, nowMs }: { readonly invitationId: unknown; readonly nowMs: number },
): Promise<void> {
  requireRole(db, ['landlord'], 'revoke invitations')
  const id = parseInvitationId(invitationId)
  if (!id) throw notFound('invitation')
  await inTransaction(db, async (trx) => {
    if (!(await revoke(trx, id, nowMs))) throw notFound('open invitation')
    await addAudit(trx, { atMs: nowMs, action: 'revoke', subjectKind: 'invitation', subjectId: id })
  })
}
