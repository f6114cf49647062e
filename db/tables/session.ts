/** `session`: a signed-in browser; the id is stored hashed. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { PersonId } from '../ids.ts'

export interface SessionTable {
  id: string
  person_id: PersonId
  expires_at_ms: number
  created_at_ms: number
}

export type SessionRow = Selectable<SessionTable>
export type NewSession = Insertable<SessionTable>
export type SessionPatch = Updateable<SessionTable>
