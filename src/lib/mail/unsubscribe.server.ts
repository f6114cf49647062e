/** The way out of letters that come by themselves: a signed link in the foot and in the headers, followed by one POST without signing in (RFC 8058). */
import type { MessageKind } from '#db/enums.ts'
import type { OrganisationId, PersonId, TenancyId } from '#db/ids.ts'
import { processConfig } from '#lib/config.server.ts'
import { signToken, signingSecret, type TokenClaims } from './link.server.ts'
import type { Secret } from './seal.server.ts'

/** Letters that a member of the organisation gets by themselves, without having asked for each. */
export const MEMBER_LETTERS = ['flag-summary', 'clock-change', 'digest'] as const satisfies readonly MessageKind[]
export type MemberLetter = (typeof MEMBER_LETTERS)[number]

export const isMemberLetter = (kind: string): kind is MemberLetter => (MEMBER_LETTERS as readonly string[]).includes(kind)

export type Subscriber = { readonly tenancyId: TenancyId } | { readonly personId: PersonId; readonly letters: MemberLetter }

export interface Unsubscribe {
  readonly url: string
  readonly secret: Secret
  readonly headers: Readonly<Record<string, string>>
  readonly footer: string
}

const VALID_MS = 365 * 86_400_000

export function unsubscribeLink(organisationId: OrganisationId, subscriber: Subscriber, nowMs: number): Unsubscribe {
  const { url, secret } = signedLink({ purpose: 'unsubscribe', expiresAtMs: nowMs + VALID_MS, subject: { organisationId, ...subscriber } })
  return {
    url,
    secret,
    headers: { 'List-Unsubscribe': `<${url}>`, 'List-Unsubscribe-Post': 'List-Unsubscribe=One-Click' },
    footer: `Stop these mails: ${url}`,
  }
}

/** The address that carries the claims, and the part of it that only the recipient may read. */
export function signedLink(claims: TokenClaims): { readonly url: string; readonly secret: Secret } {
  const token = signToken(claims, signingSecret())
  return { url: `${processConfig().baseUrl}/t/${token}`, secret: { token, claims } }
}
