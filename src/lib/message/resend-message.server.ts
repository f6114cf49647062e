/** Sends a letter again as a new one with its own cause: once a letter, however often it is pressed. An invitation gets a new link. */
import { parseInvitationId, parseMessageId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { addMessage } from '#db/queries/message.ts'
import { findOpenInvitation } from '#db/queries/organisation.ts'
import { findMessage, type StoredMessage } from '#db/queries/post.ts'
import { findSuppression } from '#db/queries/suppression.ts'
import { requireRole } from '#lib/auth/permission.ts'
import { AppError, notFound } from '#lib/http/app-error.ts'
import { resendInvitation } from '#lib/invitation/resend-invitation.server.ts'
import { messageDomain } from '#lib/mail/queue-message.server.ts'
import { resendOutcome, type ResendOutcome } from './resend.ts'

export interface ResendMessage {
  readonly messageId: unknown
  readonly organisationName: string
  readonly nowMs: number
}

export async function resendMessage(db: OrgDb, { messageId, organisationName, nowMs }: ResendMessage): Promise<void> {
  requireRole(db, ['landlord'], 'send letters again')
  const id = parseMessageId(messageId)
  if (!id) throw notFound('message')
  const again = await inTransaction(db, async (trx) => {
    const message = await findMessage(trx, id)
    if (!message) throw notFound('message')
    const outcome = await canResend(trx, message, nowMs)
    if (outcome.status === 'refused') throw new AppError('conflict', `${outcome.because} Nothing was sent.`)
    if (message.kind === 'invitation') return invitationOf(message)
    const queued = await addMessage(trx, {
      kind: message.kind,
      propertyId: message.propertyId,
      unitId: message.unitId,
      personId: message.personId,
      ...(message.tenancyId ? { tenancyId: message.tenancyId } : {}),
      toEmail: message.toEmail,
      cause: `${message.cause}|again ${message.id}`,
      subject: message.subject,
      text: message.text,
      html: message.html,
      headers: message.headers,
      attachments: message.attachments,
      privateParts: message.privateParts,
      ...(message.expiresAtMs === null ? {} : { expiresAtMs: message.expiresAtMs }),
      nowMs,
      domain: messageDomain(),
    })
    if (queued === 'already-queued')
      throw new AppError('conflict', 'It has been sent again already: the newer letter stands above it. Nothing was sent twice.')
    await addAudit(trx, { atMs: nowMs, action: 'resend', subjectKind: 'message', subjectId: id })
    return null
  })
  if (again) await resendInvitation(db, { invitationId: again, organisationName, nowMs })
}

export async function canResend(db: OrgDb, message: StoredMessage, nowMs: number): Promise<ResendOutcome> {
  const invitationId = message.kind === 'invitation' ? invitationOf(message) : null
  return resendOutcome({
    kind: message.kind,
    state: message.state,
    expiresAtMs: message.expiresAtMs,
    suppressedBecause: (await findSuppression(db, message.toEmail, message.kind))?.detail ?? null,
    invitationIsOpen: invitationId !== null && (await findOpenInvitation(db, invitationId)) !== null,
    bodiesRemoved: message.text === '',
    nowMs,
  })
}

/** An invitation's letters have its id at the front of their cause. */
const invitationOf = ({ cause }: StoredMessage) => parseInvitationId(cause.split(':')[0])
