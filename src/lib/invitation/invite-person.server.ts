/** Invites a person by e-mail to a role: the link expires, works once, replaces an earlier one, and only its hash is stored. */
import { type InvitationId, parsePropertyId, parseTenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addInvitation, revokeSameInvitations } from '#db/queries/organisation.ts'
import { findProperty } from '#db/queries/property.ts'
import { findTenancy } from '#db/queries/tenancy.ts'
import { expiryMs, newToken } from '#lib/account/tokens.server.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { actingPerson, requireRole } from '#lib/auth/permission.ts'
import { invalid, notFound } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { queueInvitation } from './invitation-letter.server.ts'
import { INVITATION_DAYS, inviteSchema } from './schemas.ts'

export async function invitePerson(
  db: OrgDb,
  { input, organisationName, nowMs }: { readonly input: unknown; readonly organisationName: string; readonly nowMs: number },
): Promise<InvitationId> {
  requireRole(db, ['landlord'], 'invite people')
  const fields = parseInput(inviteSchema, input)
  const propertyId = fields.propertyId ? parsePropertyId(fields.propertyId) : null
  const tenancyId = fields.tenancyId ? parseTenancyId(fields.tenancyId) : null
  if (fields.role === 'tenant' && !tenancyId)
    throw invalid([{ field: 'role', message: 'A tenant is invited from their unit’s page, so that the invitation knows the unit.' }])
  if ((fields.role === 'electrician' || fields.role === 'owner') && !propertyId)
    throw invalid([{ field: 'propertyId', message: 'Choose the property they may see.' }])
  return inTransaction(db, async (trx) => {
    const property = propertyId ? await findProperty(trx, propertyId) : null
    const tenancy = tenancyId ? await findTenancy(trx, tenancyId) : null
    if (propertyId && !property) throw notFound('property')
    if (tenancyId && !tenancy) throw notFound('tenancy')
    const token = newToken()
    const expiresAtMs = expiryMs(nowMs, INVITATION_DAYS * 24)
    const { email, name, role } = fields
    await revokeSameInvitations(trx, { email, role, propertyId, tenancyId }, nowMs)
    const id = await addInvitation(trx, {
      email,
      name,
      role,
      propertyId,
      tenancyId,
      tokenHash: hashToken(token),
      createdAtMs: nowMs,
      expiresAtMs,
      invitedBy: actingPerson(db),
    })
    const unitId = tenancy?.unitId ?? null
    await queueInvitation(trx, { id, email, name, role, property, unitId, organisationName, token, cause: id, nowMs, expiresAtMs })
    await addAudit(trx, { atMs: nowMs, action: 'invite', subjectKind: 'invitation', subjectId: id, after: { role, propertyId, tenancyId } })
    return id
  })
}
