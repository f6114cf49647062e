/** `signin_attempt`: a failed sign-in, counted per account and per address; keys are hashes. */
import type { Generated, Insertable, Selectable, Updateable } from 'kysely'

export interface SigninAttemptTable {
  id: Generated<number>
  key: string
  at_ms: number
}

export type SigninAttemptRow = Selectable<SigninAttemptTable>
export type NewSigninAttempt = Insertable<SigninAttemptTable>
export type SigninAttemptPatch = Updateable<SigninAttemptTable>
