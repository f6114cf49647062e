/** Checks e-mail and password under the limits and returns whose they are; the page then makes a new session. */
import type { PersonId } from '#db/ids.ts'
import { type Connection, findPersonByEmail } from '#db/queries/account.ts'
import { verifyPassword } from '#lib/auth/password.server.ts'
import { AppError, invalid } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { admitSignIn, admitted } from './limits.server.ts'
import { signInSchema } from './schemas.ts'

export interface AccountRequest {
  readonly input: unknown
  /** Of the socket, never of a header that the client wrote. */
  readonly address: string
  readonly nowMs: number
}

export async function signIn(db: Connection, { input, address, nowMs }: AccountRequest): Promise<PersonId> {
  const { email, password } = parseInput(signInSchema, input)
  const attemptIds = await admitSignIn(db, { email, address, nowMs })
  const person = await findPersonByEmail(db, email)
  const matches = await verifyPassword(person?.password_hash ?? null, password)
  // The same words for an unknown address and a wrong password.
  if (!person || !matches)
    throw invalid([{ field: 'password', message: 'E-mail and password do not match. Check both, or reset your password.' }])
  await admitted(db, email, attemptIds)
  if (person.email_confirmed_at_ms === null)
    throw new AppError('conflict', 'Confirm your address first: open the link in the mail we sent. Sign up again to get a new one.')
  return person.id
}
