/**
 * Signs a person up and mails the confirmation link; an address that is known gets a mail that says so, and the page the
 * same answer: a proof for this browser, which confirms without asking for the password again.
 */
import { addAccountEvent, addAccountToken, addPerson, changePerson, type Connection, findPersonByEmail } from '#db/queries/account.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { hashPassword } from '#lib/auth/password.server.ts'
import { processConfig } from '#lib/config.server.ts'
import { parseInput } from '#lib/http/parse.ts'
import { letter } from '#lib/mail/letter.ts'
import { queueAccountMail } from '#lib/mail/queue-message.server.ts'
import { admitMail } from './limits.server.ts'
import { signUpSchema } from './schemas.ts'
import type { AccountRequest } from './sign-in.server.ts'
import { signUpProof } from './sign-up-proof.server.ts'
import { CONFIRM_HOURS, expiryMs, newToken } from './tokens.server.ts'

export async function signUp(db: Connection, { input, address, nowMs }: AccountRequest): Promise<{ readonly proof: string }> {
  const { name, email, password } = parseInput(signUpSchema, input)
  await admitMail(db, { email, address, nowMs })
  const passwordHash = await hashPassword(password)
  const { baseUrl } = processConfig()
  const token = newToken()
  const proof = signUpProof(token, nowMs)
  return db.transaction().execute(async (trx) => {
    const known = await findPersonByEmail(trx, email)
    if (known?.email_confirmed_at_ms) {
      const { text, html } = letter({
        title: 'You already have an account',
        paragraphs: ['Somebody, perhaps you, signed up with this address. You have an account already, so nothing was changed.'],
        actions: [{ label: 'Sign in', url: `${baseUrl}/sign-in` }],
        footer: ['If it was not you, there is nothing to do.'],
      })
      await queueAccountMail(trx, {
        toEmail: email,
        kind: 'confirm',
        cause: `known:${nowMs}`,
        subject: 'You already have a Dwellhour account',
        text,
        html,
        nowMs,
      })
      return { proof }
    }
    const personId = known?.id ?? (await addPerson(trx, { email, name, passwordHash, emailConfirmedAtMs: null, createdAtMs: nowMs }))
    if (known) await changePerson(trx, known.id, { name, passwordHash })
    await addAccountEvent(trx, personId, 'sign-up', nowMs)
    const expiresAtMs = expiryMs(nowMs, CONFIRM_HOURS)
    await addAccountToken(trx, {
      tokenHash: hashToken(token),
      personId,
      purpose: 'confirm',
      expiresAtMs,
      createdAtMs: nowMs,
    })
    const { text, html } = letter({
      title: 'Confirm your address',
      paragraphs: ['Press the button to confirm that this address is yours. Then you can sign in.'],
      actions: [{ label: 'Confirm my address', url: `${baseUrl}/confirm/${token}` }],
      footer: [`The link works once, for ${CONFIRM_HOURS} hours.`, 'If you did not sign up, ignore this mail.'],
    })
    await queueAccountMail(trx, {
      toEmail: email,
      kind: 'confirm',
      cause: hashToken(token),
      subject: 'Confirm your address for Dwellhour',
      text,
      html,
      secrets: [{ token }],
      nowMs,
      expiresAtMs,
    })
    return { proof }
  })
}
