/** Limits under attack: all at once, from many addresses of one customer, and by asking for mail. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { addPerson } from '#db/queries/account.ts'
import type { Database } from '#db/schema.ts'
import { admitSignIn, ATTEMPTS_PER_ACCOUNT, ATTEMPTS_PER_ADDRESS, MAIL_WINDOW_MS, MAILS_PER_ACCOUNT } from '#lib/account/limits.server.ts'
import { networkOf } from '#lib/account/network.ts'
import { requestReset } from '#lib/account/reset-password.server.ts'
import { signIn } from '#lib/account/sign-in.server.ts'
import { hashPassword } from '#lib/auth/password.server.ts'
import { freshDatabase } from '../../support/database.ts'
import { NOW_MS } from '../../support/factories.ts'

const EMAIL = 'ada@people.example'
const PASSWORD = 'a kettle of copper'

let db: Kysely<Database>
beforeEach(async () => {
  db = await freshDatabase()
  await addPerson(db, {
    email: EMAIL,
    name: 'Ada',
    passwordHash: await hashPassword(PASSWORD),
    emailConfirmedAtMs: NOW_MS,
    createdAtMs: NOW_MS,
  })
})

const enter = (password: string, address = '192.0.2.1', email = EMAIL) => signIn(db, { input: { email, password }, address, nowMs: NOW_MS })
const codeOf = (result: PromiseSettledResult<unknown>) =>
  result.status === 'rejected' ? (result.reason as { code: string }).code : 'signed in'

describe('signIn', () => {
  it('checks no more passwords than the limit when all are sent at once', async () => {
    const results = await Promise.allSettled(
      Array.from({ length: ATTEMPTS_PER_ACCOUNT + 20 }, (_, index) => enter(`wrong number ${index}`, `192.0.2.${index}`)),
    )
    const codes = results.map(codeOf)
    expect(codes.filter((code) => code === 'invalid')).toHaveLength(ATTEMPTS_PER_ACCOUNT)
    expect(codes.filter((code) => code === 'limited')).toHaveLength(20)
  })
  it('limits an unknown account like a known one, so that the limit tells nothing', async () => {
    const codes = async (email: string, address: string) => {
      const found: string[] = []
      for (let attempt = 0; attempt <= ATTEMPTS_PER_ACCOUNT; attempt++)
        found.push(codeOf((await Promise.allSettled([enter('wrong wrong wrong', address, email)]))[0]))
      return found
    }
    expect(await codes('nobody@people.example', '192.0.2.2')).toEqual(await codes(EMAIL, '192.0.2.3'))
  })
  it('says in whole minutes and in seconds how long to wait', async () => {
    for (let attempt = 0; attempt < ATTEMPTS_PER_ACCOUNT; attempt++) await admitSignIn(db, { email: EMAIL, address: 'x', nowMs: NOW_MS })
    await expect(
      signIn(db, { input: { email: EMAIL, password: PASSWORD }, address: 'y', nowMs: NOW_MS + 5 * 60_000 }),
    ).rejects.toMatchObject({ code: 'limited', message: expect.stringContaining('Wait 10 min'), details: { retryAfterS: 600 } })
  })
  it('does not count right passwords against anybody', async () => {
    for (let attempt = 0; attempt < ATTEMPTS_PER_ADDRESS + 1; attempt++) await enter(PASSWORD)
    expect(await db.selectFrom('signin_attempt').selectAll().execute()).toEqual([])
  }, 60_000)
  it('keeps neither the account nor the address in the clear', async () => {
    await enter('wrong wrong wrong').catch(() => null)
    const stored = JSON.stringify(await db.selectFrom('signin_attempt').selectAll().execute())
    expect(stored).toContain('account:')
    for (const secret of [EMAIL, '192.0.2.1']) expect(stored).not.toContain(secret)
  })
  it('takes an unknown account as long as a known one', async () => {
    const medianMs = async (email: string, net: number) => {
      const times: number[] = []
      for (let attempt = 0; attempt < 5; attempt++) {
        const startedAtMs = performance.now()
        await enter('wrong wrong wrong', `192.0.2.${net}`, email).catch(() => null)
        times.push(performance.now() - startedAtMs)
      }
      return times.sort((a, b) => a - b)[2] ?? 0
    }
    await medianMs('warm@people.example', 9)
    const [known, unknown] = [await medianMs(EMAIL, 10), await medianMs('nobody@people.example', 11)]
    // Without the decoy an unknown account answers in about a millisecond and a known one in tens: a factor of ten at least.
    // A fifth leaves room for a busy machine and still fails without it.
    expect(unknown / known).toBeGreaterThan(0.2)
  })
})

describe('requestReset', () => {
  const ask = (email: string, nowMs = NOW_MS) => requestReset(db, { input: { email }, address: '192.0.2.1', nowMs })
  it('sends so many letters an hour and no more, the same for an unknown address', async () => {
    for (const email of [EMAIL, 'nobody@people.example']) {
      for (let letter = 0; letter < MAILS_PER_ACCOUNT; letter++) await ask(email, NOW_MS + letter)
      await expect(ask(email, NOW_MS + MAILS_PER_ACCOUNT)).rejects.toMatchObject({ code: 'limited' })
      await expect(ask(email, NOW_MS + MAIL_WINDOW_MS + MAILS_PER_ACCOUNT)).resolves.toBeUndefined()
    }
    const letters = await db.selectFrom('account_mail').select('to_email').execute()
    expect(letters.map((letter) => letter.to_email)).toEqual(Array.from({ length: MAILS_PER_ACCOUNT + 1 }, () => EMAIL))
  })
})

describe('networkOf', () => {
  it('keeps an IPv4 address, also when it comes mapped into IPv6 (RFC 4291, 2.5.5.2)', () => {
    expect(networkOf('192.0.2.33')).toBe('192.0.2.33')
    expect(networkOf('::ffff:192.0.2.33')).toBe('192.0.2.33')
  })
  it('takes the spellings of one address for one network (the examples of RFC 5952, 1)', () => {
    const spellings = ['2001:db8:0:0:1:0:0:1', '2001:0db8:0:0:1:0:0:1', '2001:db8::1:0:0:1', '2001:db8::0:1:0:0:1', '2001:DB8:0:0:1::1']
    expect(new Set(spellings.map(networkOf))).toEqual(new Set(['2001:db8:0:0::/64']))
  })
  it('counts every address of a customer’s /64 as one, and the next /64 as another', () => {
    expect(networkOf('2001:db8:7:9:aaaa::1')).toBe(networkOf('2001:db8:7:9:bbbb:cccc:dddd:eeee'))
    expect(networkOf('2001:db8:7:9::1')).not.toBe(networkOf('2001:db8:7:a::1'))
    expect(networkOf('fe80::1%eth0')).toBe('fe80:0:0:0::/64')
  })
})
