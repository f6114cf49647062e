/** Takes a role from a member, and with it the properties it opened; the last landlord stays, so that nobody locks everyone out. */
import { parsePersonId } from '#db/ids.ts'
import { ROLES } from '#db/enums.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { deleteAccessOf, deleteMembership, listMembers } from '#db/queries/organisation.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { AppError, notFound } from '#lib/http/app-error.ts'

export async function removeMember(
  db: OrgDb,
  { personId, role, nowMs }: { readonly personId: unknown; readonly role: unknown; readonly nowMs: number },
): Promise<void> {
  requireRole(db, ['landlord'], 'remove people')
  const id = parsePersonId(personId)
  const wanted = ROLES.find((known) => known === role)
  if (!id || !wanted) throw notFound('member')
  await inTransaction(db, async (trx) => {
    const members = await listMembers(trx)
    if (!members.some((member) => member.personId === id && member.role === wanted)) throw notFound('member')
    if (wanted === 'landlord' && members.filter((member) => member.role === 'landlord').length === 1) {
      throw new AppError('conflict', 'This is the last landlord. Invite another one first; nothing was changed.')
    }
    await deleteMembership(trx, id, wanted)
    if (wanted === 'electrician' || wanted === 'owner') await deleteAccessOf(trx, id, wanted)
    await addAudit(trx, { atMs: nowMs, action: 'remove', subjectKind: 'member', subjectId: id, before: { role: wanted } })
  })
}
