/** Password reset: a mailed one-use link, then a new password that ends every session. */
import {
  addAccountEvent,
  addAccountToken,
  changePerson,
  type Connection,
  deleteSessionsOf,
  findPersonByEmail,
  takeAccountToken,
} from '#db/queries/account.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { hashPassword } from '#lib/auth/password.server.ts'
import { processConfig } from '#lib/config.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { parseInput } from '#lib/http/parse.ts'
import { letter } from '#lib/mail/letter.ts'
import { queueAccountMail } from '#lib/mail/queue-message.server.ts'
import { admitMail } from './limits.server.ts'
import { newPasswordSchema, resetRequestSchema } from './schemas.ts'
import type { AccountRequest } from './sign-in.server.ts'
import { expiryMs, newToken, RESET_HOURS } from './tokens.server.ts'

/** Answers the same whether or not the address is known. */
export async function requestReset(db: Connection, { input, address, nowMs }: AccountRequest): Promise<void> {
  const { email } = parseInput(resetRequestSchema, input)
  await admitMail(db, { email, address, nowMs })
  await db.transaction().execute(async (trx) => {
    const person = await findPersonByEmail(trx, email)
    if (!person) return
    const token = newToken()
    const expiresAtMs = expiryMs(nowMs, RESET_HOURS)
    await addAccountToken(trx, {
      tokenHash: hashToken(token),
      personId: person.id,
      purpose: 'reset',
      expiresAtMs,
      createdAtMs: nowMs,
    })
    const { text, html } = letter({
      title: 'Choose a new password',
      paragraphs: ['Somebody, perhaps you, asked for a new password. Press the button to choose one. Until then the old one stays.'],
      actions: [{ label: 'Choose a new password', url: `${processConfig().baseUrl}/reset/${token}` }],
      footer: [`The link works once, for ${RESET_HOURS} hour.`, 'If it was not you, ignore this mail.'],
    })
    await queueAccountMail(trx, {
      toEmail: email,
      kind: 'reset',
      cause: hashToken(token),
      subject: 'Choose a new password for Dwellhour',
      text,
      html,
      secrets: [{ token }],
      nowMs,
      expiresAtMs,
    })
  })
}

/** Sets the password, ends every session, and counts as confirming the address: the link went there. */
export async function resetPassword(db: Connection, { input, nowMs }: { readonly input: unknown; readonly nowMs: number }): Promise<void> {
  const { token, password } = parseInput(newPasswordSchema, input)
  const passwordHash = await hashPassword(password)
  await db.transaction().execute(async (trx) => {
    const personId = await takeAccountToken(trx, { tokenHash: hashToken(token), purpose: 'reset', nowMs })
    if (!personId) throw new AppError('expired', 'This link has been used or has expired. Nothing was changed. Ask for a new one.')
    await changePerson(trx, personId, { passwordHash, emailConfirmedAtMs: nowMs })
    await deleteSessionsOf(trx, personId)
    await addAccountEvent(trx, personId, 'change-password', nowMs)
  })
}
