/** Lucia's session store over Kysely. The id in the cookie is stored hashed, so a copy of the database opens no session. */
import { createHash } from 'node:crypto'
import type { Kysely } from 'kysely'
import type { Adapter, DatabaseSession, DatabaseUser } from 'lucia'
import { parsePersonId } from '#db/ids.ts'
import type { Database } from '#db/schema.ts'

export const hashToken = (token: string): string => createHash('sha256').update(token).digest('hex')

export class KyselyAdapter implements Adapter {
  constructor(private readonly db: () => Kysely<Database>) {}

  async getSessionAndUser(sessionId: string): Promise<[DatabaseSession | null, DatabaseUser | null]> {
    const row = await this.db()
      .selectFrom('session')
      .innerJoin('person', 'person.id', 'session.person_id')
      .where('session.id', '=', hashToken(sessionId))
      .select(['session.person_id', 'session.expires_at_ms', 'person.email', 'person.name'])
      .executeTakeFirst()
    if (!row) return [null, null]
    return [
      { id: sessionId, userId: row.person_id, expiresAt: new Date(row.expires_at_ms), attributes: {} },
      { id: row.person_id, attributes: { email: row.email, name: row.name } },
    ]
  }

  /** Ids are stored hashed, so the sessions that this returns can be counted and not used. */
  async getUserSessions(userId: string): Promise<DatabaseSession[]> {
    const personId = parsePersonId(userId)
    if (!personId) return []
    const rows = await this.db().selectFrom('session').where('person_id', '=', personId).selectAll().execute()
    return rows.map((row) => ({ id: row.id, userId, expiresAt: new Date(row.expires_at_ms), attributes: {} }))
  }

  async setSession(session: DatabaseSession): Promise<void> {
    const personId = parsePersonId(session.userId)
    if (!personId) throw new Error('A session needs a person')
    await this.db()
      .insertInto('session')
      .values({ id: hashToken(session.id), person_id: personId, expires_at_ms: session.expiresAt.getTime(), created_at_ms: Date.now() })
      .execute()
  }

  async updateSessionExpiration(sessionId: string, expiresAt: Date): Promise<void> {
    await this.db().updateTable('session').set({ expires_at_ms: expiresAt.getTime() }).where('id', '=', hashToken(sessionId)).execute()
  }

  async deleteSession(sessionId: string): Promise<void> {
    await this.db().deleteFrom('session').where('id', '=', hashToken(sessionId)).execute()
  }

  async deleteUserSessions(userId: string): Promise<void> {
    const personId = parsePersonId(userId)
    if (personId) await this.db().deleteFrom('session').where('person_id', '=', personId).execute()
  }

  async deleteExpiredSessions(): Promise<void> {
    await this.db().deleteFrom('session').where('expires_at_ms', '<=', Date.now()).execute()
  }
}
