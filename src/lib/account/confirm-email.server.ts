/** Confirms an address by the token of its mail; works once. */
import { changePerson, type Connection, takeAccountToken } from '#db/queries/account.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { AppError } from '#lib/http/app-error.ts'

export async function confirmEmail(db: Connection, { token, nowMs }: { readonly token: string; readonly nowMs: number }): Promise<void> {
  await db.transaction().execute(async (trx) => {
    const personId = await takeAccountToken(trx, { tokenHash: hashToken(token), purpose: 'confirm', nowMs })
    if (!personId)
      throw new AppError('expired', 'This link has been used or has expired. Sign up again with the same address to get a new one.')
    await changePerson(trx, personId, { emailConfirmedAtMs: nowMs })
  })
}
