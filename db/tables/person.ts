/** `person`: a human being with an e-mail address; belongs to no organisation. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { PersonId } from '../ids.ts'

export interface PersonTable {
  id: PersonId
  email: string
  name: string
  password_hash: string | null
  email_confirmed_at_ms: number | null
  created_at_ms: number
}

export type PersonRow = Selectable<PersonTable>
export type NewPerson = Insertable<PersonTable>
export type PersonPatch = Updateable<PersonTable>
