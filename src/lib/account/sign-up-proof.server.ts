/** Proof that this browser is the one that signed up under a mailed token: kept in its cookie, signed, and worth nothing elsewhere. */
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { readToken, signingSecret, signToken } from '#lib/mail/link.server.ts'
import { CONFIRM_HOURS, expiryMs } from './tokens.server.ts'

export const SIGN_UP_COOKIE = 'dwellhour_sign_up'
/** Sent to the confirmation's page only. */
export const SIGN_UP_COOKIE_LIFE = { path: '/confirm', maxAge: CONFIRM_HOURS * 3_600 } as const
const PURPOSE = 'sign-up'

export const signUpProof = (token: string, nowMs: number): string =>
  signToken({ purpose: PURPOSE, expiresAtMs: expiryMs(nowMs, CONFIRM_HOURS), subject: { tokenHash: hashToken(token) } }, signingSecret())

export function provesSignUp(proof: string | undefined, token: string, nowMs: number): boolean {
  const claims = proof ? readToken(proof, { secret: signingSecret(), nowMs }) : null
  return claims?.purpose === PURPOSE && claims.subject.tokenHash === hashToken(token)
}
