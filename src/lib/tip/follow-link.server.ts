/** The signed links of a tip: each bound to one tenancy and one purpose. Reading one changes nothing; following it by POST does. */
import { parseOrganisationId, parsePersonId, parseTenancyId } from '#db/ids.ts'
import type { Connection } from '#db/queries/account.ts'
import { openForLink } from '#lib/auth/scope.server.ts'
import { giveFeedback } from '#lib/feedback/give-feedback.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { readToken, signingSecret, type TokenClaims } from '#lib/mail/link.server.ts'
import { isMemberLetter, type MemberLetter } from '#lib/mail/unsubscribe.server.ts'
import { stopMemberLetters, stopTips } from '#lib/message/stop-letters.server.ts'

export type LinkPurpose =
  | {
      readonly kind: 'feedback'
      readonly day: string
      readonly verdict: 'hot' | 'cold'
      /** Start of that day at the property: before it there is nothing to say. */
      readonly opensAtMs: number
    }
  | { readonly kind: 'unsubscribe'; readonly letters: 'tip' | MemberLetter }

/** What a link is for, or `null` when it is broken or too old. */
export function readLink(token: string, nowMs: number): LinkPurpose | null {
  const claims = claimsOf(token, nowMs)
  if (claims?.purpose === 'unsubscribe') {
    const { letters = 'tip' } = claims.subject
    return letters === 'tip' || isMemberLetter(letters) ? { kind: 'unsubscribe', letters } : null
  }
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
  const broken = new AppError('expired', 'This link is broken or too old. Nothing was changed.')
  if (!claims || !purpose || !organisationId) throw broken
  const db = openForLink(connection, organisationId)
  const tenancyId = parseTenancyId(claims.subject.tenancyId)
  const personId = parsePersonId(claims.subject.personId)
  if (purpose.kind === 'feedback' && tenancyId) await giveFeedback(db, { tenancyId, input: purpose, nowMs })
  else if (purpose.kind === 'unsubscribe' && purpose.letters !== 'tip' && personId)
    await stopMemberLetters(db, { personId, letters: purpose.letters, nowMs })
  else if (purpose.kind === 'unsubscribe' && tenancyId) await stopTips(db, { tenancyId, nowMs })
  else throw broken
  return purpose
}
