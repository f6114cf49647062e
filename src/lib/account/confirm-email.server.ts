/**
 * Confirms an address by the token of its mail; works once. Whoever opens the link must also be whoever signed up, by this
 * browser's proof or by the password: else a stranger could sign up with another's address and wait for them to confirm it.
 */
import { addAccountEvent, changePerson, type Connection, findTokenOwner, takeAccountToken } from '#db/queries/account.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { verifyPassword } from '#lib/auth/password.server.ts'
import { AppError, invalid } from '#lib/http/app-error.ts'
import { provesSignUp } from './sign-up-proof.server.ts'

export interface Confirmation {
  readonly token: string
  readonly proof: string | undefined
  readonly password: string
  readonly nowMs: number
}

export async function confirmEmail(db: Connection, { token, proof, password, nowMs }: Confirmation): Promise<void> {
  const take = { tokenHash: hashToken(token), purpose: 'confirm', nowMs } as const
  const gone = new AppError('expired', 'This link has been used or has expired. Sign up again with the same address to get a new one.')
  const person = await findTokenOwner(db, take)
  if (!person) throw gone
  if (!provesSignUp(proof, token, nowMs) && !(await verifyPassword(person.password_hash, password))) {
    throw invalid([
      { field: 'password', message: 'This is not the password of this sign-up. Nothing was confirmed. Sign up again to choose another.' },
    ])
  }
  await db.transaction().execute(async (trx) => {
    const personId = await takeAccountToken(trx, take)
    if (!personId) throw gone
    await changePerson(trx, personId, { emailConfirmedAtMs: nowMs })
    await addAccountEvent(trx, personId, 'confirm', nowMs)
  })
}
