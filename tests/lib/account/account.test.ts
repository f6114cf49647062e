/** Accounts by their rules: links work once and expire, sessions end, guessing is limited. */
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { findPersonByEmail } from '#db/queries/account.ts'
import type { Database } from '#db/schema.ts'
import { confirmEmail } from '#lib/account/confirm-email.server.ts'
import { ATTEMPT_WINDOW_MS, ATTEMPTS_PER_ACCOUNT, ATTEMPTS_PER_ADDRESS } from '#lib/account/limits.server.ts'
import { requestReset, resetPassword } from '#lib/account/reset-password.server.ts'
import { signIn } from '#lib/account/sign-in.server.ts'
import { signOutEverywhere } from '#lib/account/sign-out-everywhere.server.ts'
import { signUp } from '#lib/account/sign-up.server.ts'
import { freshDatabase } from '../../support/database.ts'
import { NOW_MS } from '../../support/factories.ts'
import { asSent } from '../../support/outbox.ts'

const ADA = { name: 'Ada Brackwater', email: 'Ada@people.example', password: 'a kettle of copper' }
const HOUR_MS = 3_600_000

let db: Kysely<Database>
beforeEach(async () => {
  db = await freshDatabase()
})

const newestLink = async (path: string): Promise<string> => {
  const mail = await db.selectFrom('account_mail').selectAll().orderBy('queued_at_ms', 'desc').orderBy('id').execute()
  const links = mail.flatMap((one) => [...asSent(one).text.matchAll(new RegExp(`/${path}/([\\w-]+)`, 'g'))].map((match) => match[1] ?? ''))
  return links.at(0) ?? ''
}
const enter = (password: string, more: Partial<{ address: string; email: string; nowMs: number }> = {}) =>
  signIn(db, { input: { email: more.email ?? ADA.email, password }, address: more.address ?? '192.0.2.1', nowMs: more.nowMs ?? NOW_MS })
const join = (input: unknown = ADA, nowMs = NOW_MS) => signUp(db, { input, address: '192.0.2.1', nowMs })
const askReset = (email: string, nowMs = NOW_MS) => requestReset(db, { input: { email }, address: '192.0.2.1', nowMs })
const confirm = (token: string, more: Partial<{ proof: string; password: string; nowMs: number }> = {}) =>
  confirmEmail(db, { token, proof: more.proof, password: more.password ?? ADA.password, nowMs: more.nowMs ?? NOW_MS })
const member = async () => {
  await join()
  await confirm(await newestLink('confirm'))
}

describe('signUp and confirmEmail', () => {
  it('lets nobody in before the address is confirmed', async () => {
    await join()
    await expect(enter(ADA.password)).rejects.toMatchObject({ code: 'conflict' })
  })
  it('confirms once, by the mailed link', async () => {
    await join()
    const token = await newestLink('confirm')
    await confirm(token)
    expect(await enter(ADA.password)).toBe((await findPersonByEmail(db, ADA.email))?.id)
    await expect(confirm(token)).rejects.toMatchObject({ code: 'expired' })
  })
  it('refuses a link after a day', async () => {
    await join()
    await expect(confirm(await newestLink('confirm'), { nowMs: NOW_MS + 24 * HOUR_MS })).rejects.toMatchObject({ code: 'expired' })
  })
  it('answers a known address the same and tells it by mail, changing nothing', async () => {
    await member()
    const again = await join({ ...ADA, password: 'somebody else entirely' }, NOW_MS + 1)
    expect(Object.keys(again)).toEqual(['proof'])
    await expect(enter(ADA.password)).resolves.toBeTruthy()
    await expect(enter('somebody else entirely')).rejects.toMatchObject({ code: 'invalid' })
  })
  it('lets whoever signed up in this browser confirm without the password, and nobody else', async () => {
    const { proof } = await join()
    const token = await newestLink('confirm')
    await expect(confirm(token, { password: '' })).rejects.toMatchObject({ code: 'invalid' })
    await expect(confirm(token, { proof, password: '' })).resolves.toBeUndefined()
  })
  it('keeps a stranger out who signed up with the same address: the owner of the mailbox does not confirm their password', async () => {
    const { proof } = await join()
    await join({ ...ADA, password: 'set by somebody else' }, NOW_MS + 1)
    const token = await newestLink('confirm')
    await expect(confirm(token, { proof, nowMs: NOW_MS + 2 })).rejects.toMatchObject({ code: 'invalid' })
    await expect(enter('set by somebody else', { nowMs: NOW_MS + 3 })).rejects.toMatchObject({ code: 'conflict' })
  })
  it('takes an address as a phone types it, with a capital and a space', async () => {
    await join({ ...ADA, email: ' Ada@people.example ' })
    expect((await findPersonByEmail(db, 'ada@people.example'))?.name).toBe(ADA.name)
  })
  it('stores the password as argon2id, with the parameters of the OWASP password storage cheat sheet, and the token as a hash', async () => {
    await join()
    // PHC string of RFC 9106's version 0x13 = 19; the sheet's second set: m = 19456 (19 MiB), t = 2, p = 1.
    expect((await findPersonByEmail(db, ADA.email))?.password_hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/)
    const stored = await db.selectFrom('account_token').select('token_hash').executeTakeFirstOrThrow()
    expect(stored.token_hash).not.toBe(await newestLink('confirm'))
  })
  it('names each field that is wrong', async () => {
    await expect(join({ name: '', email: 'x', password: 'short' })).rejects.toMatchObject({
      code: 'invalid',
      details: { fields: [{ field: 'name' }, { field: 'email' }, { field: 'password' }] },
    })
  })
})

describe('account events', () => {
  it('note sign-up, confirmation and signing out everywhere, which ends every session', async () => {
    await member()
    const person = await findPersonByEmail(db, ADA.email)
    if (!person) throw new Error('nobody signed up')
    await db
      .insertInto('session')
      .values({ id: 's', person_id: person.id, expires_at_ms: NOW_MS * 2, created_at_ms: NOW_MS })
      .execute()
    await signOutEverywhere(db, { personId: person.id, nowMs: NOW_MS + 1 })
    expect(await db.selectFrom('session').selectAll().execute()).toEqual([])
    const events = await db.selectFrom('account_event').select('action').orderBy('at_ms').execute()
    expect(events.map((event) => event.action).sort()).toEqual(['confirm', 'sign-out-everywhere', 'sign-up'])
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
    await askReset(ADA.email, NOW_MS + 1)
    const token = await newestLink('reset')
    await resetPassword(db, { input: { token, password: 'a valve of verdigris' }, nowMs: NOW_MS + 2 })
    expect(await db.selectFrom('session').selectAll().execute()).toEqual([])
    await expect(enter('a valve of verdigris')).resolves.toBeTruthy()
    await expect(resetPassword(db, { input: { token, password: 'a third one for luck' }, nowMs: NOW_MS + 3 })).rejects.toMatchObject({
      code: 'expired',
    })
  })
  it('answers the same for an unknown address and sends nothing', async () => {
    await expect(askReset('nobody@people.example')).resolves.toBeUndefined()
    expect(await db.selectFrom('account_mail').selectAll().execute()).toEqual([])
  })
  it('lets one of ten at once set the password', async () => {
    await member()
    await askReset(ADA.email, NOW_MS + 1)
    const token = await newestLink('reset')
    const tries = Array.from({ length: 10 }, (_, index) =>
      resetPassword(db, { input: { token, password: `valve number ${index} of ten` }, nowMs: NOW_MS + 2 }),
    )
    expect((await Promise.allSettled(tries)).filter((result) => result.status === 'fulfilled')).toHaveLength(1)
  })
  it('refuses a link after an hour, one for another purpose, and one that a newer has replaced', async () => {
    await member()
    await askReset(ADA.email, NOW_MS + 1)
    const first = await newestLink('reset')
    const set = (token: string, nowMs: number) => resetPassword(db, { input: { token, password: 'a valve of verdigris' }, nowMs })
    await expect(set(first, NOW_MS + 1 + HOUR_MS)).rejects.toMatchObject({ code: 'expired' })
    await expect(confirm(first, { nowMs: NOW_MS + 2 })).rejects.toMatchObject({ code: 'expired' })
    await askReset(ADA.email, NOW_MS + 3)
    await expect(set(first, NOW_MS + 4)).rejects.toMatchObject({ code: 'expired' })
    await expect(set(await newestLink('reset'), NOW_MS + 4)).resolves.toBeUndefined()
  })
  it('confirms an address that was not confirmed: the link went there', async () => {
    await join()
    await askReset(ADA.email, NOW_MS + 1)
    await resetPassword(db, { input: { token: await newestLink('reset'), password: 'a valve of verdigris' }, nowMs: NOW_MS + 2 })
    await expect(enter('a valve of verdigris', { nowMs: NOW_MS + 3 })).resolves.toBeTruthy()
  })
})
