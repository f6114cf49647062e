/** What a signed "stop these mails" does: no more of that kind, those that wait included. The link is the permission. */
import type { PersonId, TenancyId } from '#db/ids.ts'
import { inTransaction, type OrgDb } from '#db/org-db.ts'
import { addAudit } from '#db/queries/audit.ts'
import { listMembers } from '#db/queries/organisation.ts'
import { addSuppression } from '#db/queries/suppression.ts'
import { changeTenancyTips, findTenancy } from '#db/queries/tenancy.ts'
import { AppError } from '#lib/http/app-error.ts'
import type { MemberLetter } from '#lib/mail/unsubscribe.server.ts'

export async function stopTips(db: OrgDb, { tenancyId, nowMs }: { readonly tenancyId: TenancyId; readonly nowMs: number }): Promise<void> {
  await inTransaction(db, async (trx) => {
    const tenancy = await findTenancy(trx, tenancyId)
    if (!tenancy) throw new AppError('expired', 'This tenancy is over. Nothing was changed.')
    await changeTenancyTips(trx, tenancyId, 'never')
    await addAudit(trx, {
      atMs: nowMs,
      action: 'unsubscribe',
      subjectKind: 'tenancy',
      subjectId: tenancyId,
      before: { tips: tenancy.tips },
      after: { tips: 'never' },
    })
  })
}

interface MemberStop {
  readonly personId: PersonId
  readonly letters: MemberLetter
  readonly nowMs: number
}

export async function stopMemberLetters(db: OrgDb, { personId, letters, nowMs }: MemberStop): Promise<void> {
  await inTransaction(db, async (trx) => {
    const member = (await listMembers(trx)).find((one) => one.personId === personId)
    if (!member) throw new AppError('expired', 'You are no longer in this organisation, so nothing comes any more. Nothing was changed.')
    await addSuppression(trx, {
      email: member.email,
      kind: letters,
      reason: 'unsubscribe',
      detail: 'The recipient asked for no more of these.',
      atMs: nowMs,
    })
    await addAudit(trx, { atMs: nowMs, action: 'unsubscribe', subjectKind: 'person', subjectId: personId, after: { letters } })
  })
}
