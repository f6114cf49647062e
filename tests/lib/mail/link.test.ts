/** Signed links: HMAC-SHA256 (RFC 2104), base64url (RFC 4648 5), checked against Node's own implementation of the same. */
import { createHmac } from 'node:crypto'
import { mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { readToken, signToken } from '#lib/mail/link.server.ts'

const SECRET = 'a secret of at least thirty-two characters'
const NOW_MS = Date.UTC(2026, 1, 3)
const CLAIMS = { purpose: 'feedback', expiresAtMs: NOW_MS + 1, subject: { tenancyId: 't1', day: '2026-02-03' } }

describe('readToken', () => {
  it('returns the claims of an untouched token until it expires', () => {
    const token = signToken(CLAIMS, SECRET)
    expect(readToken(token, { secret: SECRET, nowMs: NOW_MS })).toEqual(CLAIMS)
    expect(readToken(token, { secret: SECRET, nowMs: NOW_MS + 1 })).toBeNull()
  })

  it('refuses a changed body, a changed signature, another secret and anything that is no token', () => {
    const token = signToken(CLAIMS, SECRET)
    const [body = '', mac = ''] = token.split('.')
    const forged = Buffer.from(JSON.stringify({ ...CLAIMS, expiresAtMs: NOW_MS * 2 })).toString('base64url')
    const read = (text: string, secret = SECRET) => readToken(text, { secret, nowMs: NOW_MS })
    for (const text of [`${forged}.${mac}`, `${body}.${mac.slice(0, -1)}`, `${body}.`, body, '', `${token}.x`, 'ä.ö'])
      expect(read(text)).toBeNull()
    expect(read(token, `${SECRET}!`)).toBeNull()
  })

  it('is safe in an address and signed by HMAC-SHA256 over the body', () => {
    const token = signToken(CLAIMS, SECRET)
    const [body = '', mac] = token.split('.')
    expect(token).toMatch(/^[\w-]+\.[\w-]+$/)
    expect(mac).toBe(createHmac('sha256', SECRET).update(body).digest('base64url'))
  })
})

describe('signingSecret', () => {
  const folder = mkdtempSync(join(tmpdir(), 'dwellhour-secret-'))
  afterEach(() => {
    vi.unstubAllEnvs()
    vi.resetModules()
    rmSync(folder, { recursive: true, force: true })
  })

  it('is made once, kept for its owner alone, and the same for the next process', async () => {
    vi.stubEnv('DWELLHOUR_DATA_DIR', folder)
    vi.stubEnv('DWELLHOUR_SECRET', '')
    vi.resetModules()
    const first = await import('#lib/mail/link.server.ts')
    const secret = first.signingSecret()
    expect(secret.length).toBeGreaterThanOrEqual(64)
    expect(statSync(join(folder, 'signing-key')).mode & 0o777).toBe(0o600)
    expect(readFileSync(join(folder, 'signing-key'), 'utf8')).toBe(secret)
    vi.resetModules()
    const next = await import('#lib/mail/link.server.ts')
    expect(next.signingSecret()).toBe(secret)
  })
})
