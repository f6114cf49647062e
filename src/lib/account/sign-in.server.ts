/** Checks e-mail and password under the limits and returns whose they are; the page then makes a new session. */
import type { PersonId } from '#db/ids.ts'
import { type Connection, findPersonByEmail } from '#db/queries/account.ts'
import { verifyPassword } from '#lib/auth/password.server.ts'
import { AppError, invalid } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { checkAttempts, forgetFailures, noteFailure } from './limits.server.ts'
import { signInSchema } from './schemas.ts'

export interface SignIn {
  readonly input: unknown
  readonly address: string
  readonly nowMs: number
}

export async function signIn(db: Connection, { input, address, nowMs }: SignIn): Promise<PersonId> {
  const { email, password } = parseInput(signInSchema, input)
  const attempt = { email, address, nowMs }
  await checkAttempts(db, attempt)
  const person = await findPersonByEmail(db, email)
  const matches = await verifyPassword(person?.password_hash ?? null, password)
  if (!person || !matches) {
    await noteFailure(db, attempt)
    // The same words for an unknown address and a wrong password.
    throw invalid([{ field: 'password', message: 'E-mail and password do not match. Check both, or reset your password.' }])
  }
  if (person.email_confirmed_at_ms === null)
    throw new AppError('conflict', 'Confirm your address first: open the link in the mail we sent. Sign up again to get a new one.')
  await forgetFailures(db, email)
  return person.id
}
