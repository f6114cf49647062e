/** Sends an open invitation again: a new link for another fourteen days; the link before it stops working at once. */
import { parseInvitationId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changeInvitationToken, findOpenInvitation } from '#db/queries/organisation.ts'
import { findProperty } from '#db/queries/property.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import { expiryMs, newToken } from '#lib/account/tokens.server.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { notFound } from '#lib/http/app-error.ts'
import { queueInvitation } from './invitation-letter.server.ts'
import { INVITATION_DAYS } from './schemas.ts'

export interface Resend {
  readonly invitationId: unknown
  readonly organisationName: string
  readonly nowMs: number
}

export async function resendInvitation(db: OrgDb, { invitationId, organisationName, nowMs }: Resend): Promise<void> {
  requireRole(db, ['landlord'], 'send invitations')
  const id = parseInvitationId(invitationId)
  if (!id) throw notFound('invitation')
  await inTransaction(db, async (trx) => {
    const found = await findOpenInvitation(trx, id)
    if (!found) throw notFound('open invitation')
    const property = found.propertyId ? await findProperty(trx, found.propertyId) : null
    const tenancy = found.tenancyId ? await findTenancy(trx, found.tenancyId) : null
    const token = newToken()
    const expiresAtMs = expiryMs(nowMs, INVITATION_DAYS * 24)
    await changeInvitationToken(trx, id, { tokenHash: hashToken(token), expiresAtMs })
    const { email, name, role } = found
    const cause = `${id}:${hashToken(token)}`
    const unitId = tenancy?.unitId ?? null
    await queueInvitation(trx, { id, email, name, role, property, unitId, organisationName, token, cause, nowMs, expiresAtMs })
    await addAudit(trx, { atMs: nowMs, action: 'resend', subjectKind: 'invitation', subjectId: id })
  })
}
