/** Accounts by their rules: links work once and expire, sessions end, guessing is limited. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { findPersonByEmail } from '#db/queries/account.ts'
import type { Database } from '#db/schema.ts'
import { confirmEmail } from '#lib/account/confirm-email.server.ts'
import { ATTEMPT_WINDOW_MS, ATTEMPTS_PER_ACCOUNT, ATTEMPTS_PER_ADDRESS } from '#lib/account/limits.server.ts'
import { requestReset, resetPassword } from '#lib/account/reset-password.server.ts'
import { signIn } from '#lib/account/sign-in.server.ts'
import { signUp } from '#lib/account/sign-up.server.ts'
import { freshDatabase } from '../../support/database.ts'
import { NOW_MS } from '../../support/factories.ts'

const ADA = { name: 'Ada Brackwater', email: 'Ada@people.example', password: 'a kettle of copper' }
const HOUR_MS = 3_600_000

let db: Kysely<Database>
beforeEach(async () => {
  db = await freshDatabase()
})

const newestLink = async (path: string): Promise<string> => {
  const mail = await db.selectFrom('account_mail').selectAll().orderBy('queued_at_ms', 'desc').orderBy('id').execute()
  const links = mail.flatMap((one) => [...one.text.matchAll(new RegExp(`/${path}/([\\w-]+)`, 'g'))].map((match) => match[1] ?? ''))
  return links.at(0) ?? ''
}
const enter = (password: string, more: Partial<{ address: string; email: string; nowMs: number }> = {}) =>
  signIn(db, { input: { email: more.email ?? ADA.email, password }, address: more.address ?? '192.0.2.1', nowMs: more.nowMs ?? NOW_MS })
const member = async () => {
  await signUp(db, { input: ADA, nowMs: NOW_MS })
  await confirmEmail(db, { token: await newestLink('confirm'), nowMs: NOW_MS })
}

describe('signUp and confirmEmail', () => {
  it('lets nobody in before the address is confirmed', async () => {
    await signUp(db, { input: ADA, nowMs: NOW_MS })
    await expect(enter(ADA.password)).rejects.toMatchObject({ code: 'conflict' })
  })
  it('confirms once, by the mailed link', async () => {
    await signUp(db, { input: ADA, nowMs: NOW_MS })
    const token = await newestLink('confirm')
    await confirmEmail(db, { token, nowMs: NOW_MS })
    expect(await enter(ADA.password)).toBe((await findPersonByEmail(db, ADA.email))?.id)
    await expect(confirmEmail(db, { token, nowMs: NOW_MS })).rejects.toMatchObject({ code: 'expired' })
  })
  it('refuses a link after a day', async () => {
    await signUp(db, { input: ADA, nowMs: NOW_MS })
    await expect(confirmEmail(db, { token: await newestLink('confirm'), nowMs: NOW_MS + 24 * HOUR_MS })).rejects.toMatchObject({
      code: 'expired',
    })
  })
  it('answers a known address the same and tells it by mail, changing nothing', async () => {
    await member()
    await expect(signUp(db, { input: { ...ADA, password: 'somebody else entirely' }, nowMs: NOW_MS + 1 })).resolves.toBeUndefined()
    await expect(enter(ADA.password)).resolves.toBeTruthy()
    await expect(enter('somebody else entirely')).rejects.toMatchObject({ code: 'invalid' })
  })
  it('stores the password as argon2id and the token as a hash', async () => {
    await signUp(db, { input: ADA, nowMs: NOW_MS })
    expect((await findPersonByEmail(db, ADA.email))?.password_hash).toMatch(/^\$argon2id\$/)
    const stored = await db.selectFrom('account_token').select('token_hash').executeTakeFirstOrThrow()
    expect(stored.token_hash).not.toBe(await newestLink('confirm'))
  })
  it('names each field that is wrong', async () => {
    await expect(signUp(db, { input: { name: '', email: 'x', password: 'short' }, nowMs: NOW_MS })).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: [{ field: 'name' }, { field: 'email' }, { field: 'password' }] },
    })
  })
})

describe('signIn', () => {
  it('says the same for a wrong password and an unknown address', async () => {
    await member()
    const wrong = await enter('not this one at all').catch((error: Error) => error.message)
    const unknown = await enter(ADA.password, { email: 'nobody@people.example' }).catch((error: Error) => error.message)
    expect(wrong).toBe(unknown)
  })
  it('limits failures per account, whatever the address, until the window has passed', async () => {
    await member()
    for (let attempt = 0; attempt < ATTEMPTS_PER_ACCOUNT; attempt++)
      await enter('wrong wrong wrong', { address: `192.0.2.${attempt}` }).catch(() => null)
    await expect(enter(ADA.password, { address: '198.51.100.1' })).rejects.toMatchObject({ code: 'limited' })
    await expect(enter(ADA.password, { nowMs: NOW_MS + ATTEMPT_WINDOW_MS + 1 })).resolves.toBeTruthy()
  })
  it('limits failures per address, whatever the account', async () => {
    await member()
    for (let attempt = 0; attempt < ATTEMPTS_PER_ADDRESS; attempt++)
      await enter('wrong wrong wrong', { email: `guess${attempt}@people.example` }).catch(() => null)
    await expect(enter(ADA.password)).rejects.toMatchObject({ code: 'limited' })
    await expect(enter(ADA.password, { address: '198.51.100.1' })).resolves.toBeTruthy()
  }, 60_000)
})

describe('resetPassword', () => {
  it('sets the new password once and ends every session', async () => {
    await member()
    const person = await findPersonByEmail(db, ADA.email)
    await db
      .insertInto('session')
      .values({ id: 's', person_id: person?.id as NonNullable<typeof person>['id'], expires_at_ms: NOW_MS * 2, created_at_ms: NOW_MS })
      .execute()
    await requestReset(db, { input: { email: ADA.email }, nowMs: NOW_MS + 1 })
    const token = await newestLink('reset')
    await resetPassword(db, { input: { token, password: 'a valve of verdigris' }, nowMs: NOW_MS + 2 })
    expect(await db.selectFrom('session').selectAll().execute()).toEqual([])
    await expect(enter('a valve of verdigris')).resolves.toBeTruthy()
    await expect(resetPassword(db, { input: { token, password: 'a third one for luck' }, nowMs: NOW_MS + 3 })).rejects.toMatchObject({
      code: 'expired',
    })
  })
  it('answers the same for an unknown address and sends nothing', async () => {
    await expect(requestReset(db, { input: { email: 'nobody@people.example' }, nowMs: NOW_MS })).resolves.toBeUndefined()
    expect(await db.selectFrom('account_mail').selectAll().execute()).toEqual([])
  })
})
