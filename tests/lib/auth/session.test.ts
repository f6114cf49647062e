/** Sessions by their rules: hashed at rest, a new one at each sign-in, gone when ended; the cookie's own rules. */
import type { AstroCookies, AstroCookieSetOptions } from 'astro'
import type { Kysely } from 'kysely'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { Database } from '#db/schema.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { lucia, SESSION_DAYS } from '#lib/auth/lucia.server.ts'
import { endSession, startSession } from '#lib/auth/start-session.server.ts'
import { freshDatabase } from '../../support/database.ts'
import { makePerson } from '../../support/factories.ts'

const held = vi.hoisted(() => ({ db: null as unknown }))
vi.mock('#lib/database.server.ts', () => ({ database: () => held.db }))

let db: Kysely<Database>
beforeEach(async () => {
  db = await freshDatabase()
  held.db = db
})

/** A browser's cookies as far as a session needs them; keeps how each was set. */
function jar() {
  const kept = new Map<string, { value: string; options: AstroCookieSetOptions | undefined }>()
  const cookies = {
    get: (name: string) => kept.get(name),
    set: (name: string, value: string, options?: AstroCookieSetOptions) => kept.set(name, { value, options }),
  } as unknown as AstroCookies
  return { cookies, session: () => kept.get(lucia().sessionCookieName) }
}
const valid = async (id: string) => (await lucia().validateSession(id)).session !== null

describe('startSession', () => {
  it('ends the session before it: an id that was known before signing in opens nothing after', async () => {
    const { cookies, session } = jar()
    const person = await makePerson(db)
    await startSession(cookies, person)
    const first = session()?.value ?? ''
    await startSession(cookies, person)
    const second = session()?.value ?? ''
    expect(second).not.toBe(first)
    expect([await valid(first), await valid(second)]).toEqual([false, true])
  })
  it('never takes an id that the browser brought along', async () => {
    const { cookies, session } = jar()
    cookies.set(lucia().sessionCookieName, 'chosen-by-an-attacker-in-advance')
    await startSession(cookies, await makePerson(db))
    expect(session()?.value).not.toBe('chosen-by-an-attacker-in-advance')
    expect(await valid('chosen-by-an-attacker-in-advance')).toBe(false)
  })
  it('stores the SHA-256 of the id, so that a copy of the database opens no session', async () => {
    const { cookies, session } = jar()
    await startSession(cookies, await makePerson(db))
    const id = session()?.value ?? ''
    const row = await db.selectFrom('session').selectAll().executeTakeFirstOrThrow()
    expect(row.id).toBe(hashToken(id))
    expect(await valid(row.id)).toBe(false)
  })
  it('sets a cookie no script can read and no other site’s form sends', async () => {
    const { cookies, session } = jar()
    await startSession(cookies, await makePerson(db))
    expect(session()?.options).toMatchObject({ httpOnly: true, sameSite: 'lax', secure: false, path: '/' })
  })
})

describe('endSession', () => {
  it('ends this session and leaves the person’s others', async () => {
    const [here, there] = [jar(), jar()]
    const person = await makePerson(db)
    await startSession(here.cookies, person)
    await startSession(there.cookies, person)
    const ended = here.session()?.value ?? ''
    await endSession(here.cookies)
    expect(here.session()?.value).toBe('')
    expect([await valid(ended), await valid(there.session()?.value ?? '')]).toEqual([false, true])
  })
})

describe('invalidateUserSessions', () => {
  it('ends every session of the person and nobody else’s', async () => {
    const [mine, other] = [jar(), jar()]
    const person = await makePerson(db)
    await startSession(mine.cookies, person)
    await startSession(jar().cookies, person)
    await startSession(other.cookies, await makePerson(db))
    await lucia().invalidateUserSessions(person)
    expect([await valid(mine.session()?.value ?? ''), await valid(other.session()?.value ?? '')]).toEqual([false, true])
    expect(await db.selectFrom('session').selectAll().execute()).toHaveLength(1)
  })
})

describe('validateSession', () => {
  it('refuses and removes a session that has expired', async () => {
    const { cookies, session } = jar()
    await startSession(cookies, await makePerson(db))
    await db.updateTable('session').set({ expires_at_ms: 1 }).execute()
    expect(await valid(session()?.value ?? '')).toBe(false)
    expect(await db.selectFrom('session').selectAll().execute()).toEqual([])
  })
  it('prolongs a session in the second half of its life, and only then', async () => {
    const { cookies, session } = jar()
    await startSession(cookies, await makePerson(db))
    const id = session()?.value ?? ''
    expect((await lucia().validateSession(id)).session?.fresh).toBe(false)
    const lateMs = Date.now() + (SESSION_DAYS / 2 - 1) * 86_400_000
    await db.updateTable('session').set({ expires_at_ms: lateMs }).execute()
    expect((await lucia().validateSession(id)).session?.fresh).toBe(true)
    expect((await db.selectFrom('session').select('expires_at_ms').executeTakeFirstOrThrow()).expires_at_ms).toBeGreaterThan(lateMs)
  })
})
