/** `account_event`: a change that a person made to their own account. */
import type { PersonId } from '../ids.ts'

export interface AccountEventTable {
  id: string
  person_id: PersonId
  action: 'sign-up' | 'confirm' | 'change-password' | 'sign-out-everywhere'
  at_ms: number
}
