/** `account_token`: a one-use link for confirming an address or resetting a password; only its hash is stored. */
import type { Insertable, Selectable, Updateable } from 'kysely'
import type { PersonId } from '../ids.ts'

export interface AccountTokenTable {
  token_hash: string
  person_id: PersonId
  purpose: 'confirm' | 'reset'
  expires_at_ms: number
  used_at_ms: number | null
  created_at_ms: number
}

export type AccountTokenRow = Selectable<AccountTokenTable>
export type NewAccountToken = Insertable<AccountTokenTable>
export type AccountTokenPatch = Updateable<AccountTokenTable>
