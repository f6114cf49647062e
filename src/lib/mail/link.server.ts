/** Signed links in mail: bound to one purpose and its payload, with an expiry, checked in constant time. No state is needed to verify them. */
import { createHmac, randomBytes, timingSafeEqual } from 'node:crypto'
import { chmodSync, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { processConfig } from '#lib/config.server.ts'

export interface TokenClaims {
  readonly purpose: string
  readonly expiresAtMs: number
  readonly subject: Readonly<Record<string, string>>
}

export function signToken(claims: TokenClaims, secret: string): string {
  const body = Buffer.from(JSON.stringify(claims)).toString('base64url')
  return `${body}.${mac(body, secret)}`
}

/** The claims of an untouched token that has not expired; `null` for anything else, whatever the reason. */
export function readToken(token: string, { secret, nowMs }: { readonly secret: string; readonly nowMs: number }): TokenClaims | null {
  const [body, given, ...rest] = token.split('.')
  if (!body || !given || rest.length > 0) return null
  const expected = Buffer.from(mac(body, secret))
  const actual = Buffer.from(given)
  if (actual.length !== expected.length || !timingSafeEqual(actual, expected)) return null
  const claims = JSON.parse(Buffer.from(body, 'base64url').toString('utf8')) as TokenClaims
  return claims.expiresAtMs > nowMs ? claims : null
}

const mac = (body: string, secret: string): string => createHmac('sha256', secret).update(body).digest('base64url')

const SECRET_BYTES = 48
let kept: string | null = null

/** The signing key: from the environment, or made once and kept in the data folder, readable by its owner alone. */
export function signingSecret(): string {
  if (kept) return kept
  const { secret, dataDir } = processConfig()
  if (secret) return (kept = secret)
  mkdirSync(dataDir, { recursive: true })
  const file = join(dataDir, 'signing-key')
  if (!existsSync(file)) {
    try {
      writeFileSync(file, randomBytes(SECRET_BYTES).toString('base64url'), { flag: 'wx', mode: 0o600 })
    } catch (error) {
      // The other process may have made it a moment ago; any other failure stands.
      if (!existsSync(file)) throw error
    }
    chmodSync(file, 0o600)
  }
  return (kept = readFileSync(file, 'utf8').trim())
}
