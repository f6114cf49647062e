/** People, their sessions, one-use tokens and failed sign-ins. They belong to no organisation, so these take the connection. */
import type { Kysely } from 'kysely'
import { newId, type PersonId } from '../ids.ts'
import type { Database } from '../schema.ts'
import type { PersonRow } from '../tables/person.ts'

export type Connection = Kysely<Database>
export type Person = PersonRow

export const findPersonByEmail = (db: Connection, email: string): Promise<Person | undefined> =>
  db.selectFrom('person').where('email', '=', email.toLowerCase()).selectAll().executeTakeFirst()

export const findPerson = (db: Connection, id: PersonId): Promise<Person | undefined> =>
  db.selectFrom('person').where('id', '=', id).selectAll().executeTakeFirst()

export interface NewPersonFields {
  readonly email: string
  readonly name: string
  readonly passwordHash: string | null
  readonly emailConfirmedAtMs: number | null
  readonly createdAtMs: number
}

export async function addPerson(db: Connection, fields: NewPersonFields): Promise<PersonId> {
  const id = newId<PersonId>()
  await db
    .insertInto('person')
    .values({
      id,
      email: fields.email.toLowerCase(),
      name: fields.name,
      password_hash: fields.passwordHash,
      email_confirmed_at_ms: fields.emailConfirmedAtMs,
      created_at_ms: fields.createdAtMs,
    })
    .execute()
  return id
}

export interface PersonChange {
  readonly name?: string
  readonly passwordHash?: string
  readonly emailConfirmedAtMs?: number
}

export async function changePerson(db: Connection, id: PersonId, change: PersonChange): Promise<void> {
  await db
    .updateTable('person')
    .set({
      ...(change.name === undefined ? {} : { name: change.name }),
      ...(change.passwordHash === undefined ? {} : { password_hash: change.passwordHash }),
      ...(change.emailConfirmedAtMs === undefined ? {} : { email_confirmed_at_ms: change.emailConfirmedAtMs }),
    })
    .where('id', '=', id)
    .execute()
}

export const deleteSessionsOf = (db: Connection, personId: PersonId) => db.deleteFrom('session').where('person_id', '=', personId).execute()

export interface NewToken {
  readonly tokenHash: string
  readonly personId: PersonId
  readonly purpose: 'confirm' | 'reset'
  readonly expiresAtMs: number
  readonly createdAtMs: number
}

/** A new token replaces the person's older ones of the same purpose. */
export async function addAccountToken(db: Connection, token: NewToken): Promise<void> {
  await db.deleteFrom('account_token').where('person_id', '=', token.personId).where('purpose', '=', token.purpose).execute()
  await db
    .insertInto('account_token')
    .values({
      token_hash: token.tokenHash,
      person_id: token.personId,
      purpose: token.purpose,
      expires_at_ms: token.expiresAtMs,
      used_at_ms: null,
      created_at_ms: token.createdAtMs,
    })
    .execute()
}

/** Whose token this is while it can still be taken; `null` when it is unknown, expired or used. */
export async function findTokenOwner(
  db: Connection,
  find: { readonly tokenHash: string; readonly purpose: 'confirm' | 'reset'; readonly nowMs: number },
): Promise<Person | null> {
  const row = await db
    .selectFrom('account_token')
    .innerJoin('person', 'person.id', 'account_token.person_id')
    .where('account_token.token_hash', '=', find.tokenHash)
    .where('account_token.purpose', '=', find.purpose)
    .where('account_token.used_at_ms', 'is', null)
    .where('account_token.expires_at_ms', '>', find.nowMs)
    .selectAll('person')
    .executeTakeFirst()
  return row ?? null
}

/** Marks a token as used and returns whose it was; `null` when it is unknown, expired or used already. Two at once: one wins. */
export async function takeAccountToken(
  db: Connection,
  take: { readonly tokenHash: string; readonly purpose: 'confirm' | 'reset'; readonly nowMs: number },
): Promise<PersonId | null> {
  const taken = await db
    .updateTable('account_token')
    .set({ used_at_ms: take.nowMs })
    .where('token_hash', '=', take.tokenHash)
    .where('purpose', '=', take.purpose)
    .where('used_at_ms', 'is', null)
    .where('expires_at_ms', '>', take.nowMs)
    .returning('person_id')
    .executeTakeFirst()
  return taken?.person_id ?? null
}

export async function countAttempts(
  db: Connection,
  key: string,
  sinceMs: number,
): Promise<{ readonly count: number; readonly oldestMs: number | null }> {
  const row = await db
    .selectFrom('signin_attempt')
    .where('key', '=', key)
    .where('at_ms', '>', sinceMs)
    .select(({ fn }) => [fn.countAll<number>().as('count'), fn.min('at_ms').as('oldest')])
    .executeTakeFirstOrThrow()
  return { count: Number(row.count), oldestMs: row.oldest }
}

export async function addAttempts(db: Connection, keys: readonly string[], atMs: number): Promise<readonly number[]> {
  const rows = await db
    .insertInto('signin_attempt')
    .values(keys.map((key) => ({ key, at_ms: atMs })))
    .returning('id')
    .execute()
  return rows.map((row) => row.id)
}

export const deleteAttempts = (db: Connection, ids: readonly number[]) => db.deleteFrom('signin_attempt').where('id', 'in', ids).execute()

export const clearAttempts = (db: Connection, key: string) => db.deleteFrom('signin_attempt').where('key', '=', key).execute()

/** Removes what has run out; returns the number of rows. */
export async function deleteExpired(db: Connection, nowMs: number, attemptsBeforeMs: number): Promise<number> {
  const results = [
    await db.deleteFrom('session').where('expires_at_ms', '<=', nowMs).executeTakeFirst(),
    await db.deleteFrom('account_token').where('expires_at_ms', '<=', nowMs).executeTakeFirst(),
    await db.deleteFrom('signin_attempt').where('at_ms', '<=', attemptsBeforeMs).executeTakeFirst(),
  ]
  return results.reduce((sum, result) => sum + Number(result.numDeletedRows), 0)
}

export type AccountAction = 'sign-up' | 'confirm' | 'change-password' | 'sign-out-everywhere'

/** Every change a person makes to their own account, as the audit of what belongs to no organisation. */
export async function addAccountEvent(db: Connection, personId: PersonId, action: AccountAction, atMs: number): Promise<void> {
  await db.insertInto('account_event').values({ id: newId<string>(), person_id: personId, action, at_ms: atMs }).execute()
}
