/** The signed links of a tip: each bound to one tenancy and one purpose. Reading one changes nothing; following it by POST does. */
import { parseOrganisationId, parseTenancyId } from '#db/ids.ts'
import { inTransaction } from '#db/org-db.ts'
import type { Connection } from '#db/queries/account.ts'
import { addAudit } from '#db/queries/audit.ts'
import { changeTenancyTips, findTenancy } from '#db/queries/tenancy.ts'
import { openForLink } from '#lib/auth/scope.server.ts'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { readToken, signingSecret, type TokenClaims } from '#lib/mail/link.server.ts'

export type LinkPurpose =
  | {
      readonly kind: 'feedback'
      readonly day: string
      readonly verdict: 'hot' | 'cold'
      /** Start of that day at the property: before it there is nothing to say. */
      readonly opensAtMs: number
    }
  | { readonly kind: 'unsubscribe' }

/** What a link is for, or `null` when it is broken or too old. */
export function readLink(token: string, nowMs: number): LinkPurpose | null {
  const claims = claimsOf(token, nowMs)
  if (claims?.purpose === 'unsubscribe') return { kind: 'unsubscribe' }
  const { day, verdict, opensAtMs } = claims?.subject ?? {}
  if (claims?.purpose !== 'feedback' || !day || (verdict !== 'hot' && verdict !== 'cold')) return null
  return { kind: 'feedback', day, verdict, opensAtMs: Number(opensAtMs) }
}

const claimsOf = (token: string, nowMs: number): TokenClaims | null => readToken(token, { secret: signingSecret(), nowMs })

export async function followLink(
  connection: Connection,
  { token, nowMs }: { readonly token: string; readonly nowMs: number },
): Promise<LinkPurpose> {
  const claims = claimsOf(token, nowMs)
  const purpose = readLink(token, nowMs)
  const organisationId = parseOrganisationId(claims?.subject.organisationId)
  const tenancyId = parseTenancyId(claims?.subject.tenancyId)
  if (!purpose || !organisationId || !tenancyId) throw new AppError('expired', 'This link is broken or too old. Nothing was changed.')
  const db = openForLink(connection, organisationId)
  if (purpose.kind === 'feedback') {
    await giveFeedback(db, { tenancyId, input: purpose, nowMs })
    return purpose
  }
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
  return purpose
}
