/**
 * Limits on sign-ins and on asked-for mail, per account and per network address, kept in the database as hashes so that a
 * restart forgets nothing. An attempt counts before it is answered: a thousand at once get no further than ten in a row.
 */
import { addAttempts, clearAttempts, type Connection, countAttempts, deleteAttempts } from '#db/queries/account.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { AppError } from '#lib/http/app-error.ts'
import { networkOf } from './network.ts'

/** Guessing: 10 in 15 minutes is 960 a day against a 12-character password; a household behind one address gets 30. */
export const ATTEMPT_WINDOW_MS = 15 * 60_000
export const ATTEMPTS_PER_ACCOUNT = 10
export const ATTEMPTS_PER_ADDRESS = 30
/** Letters asked for at sign-up and reset: five an hour fill nobody's mailbox; an office behind one address gets 30. */
export const MAIL_WINDOW_MS = 60 * 60_000
export const MAILS_PER_ACCOUNT = 5
export const MAILS_PER_ADDRESS = 30

export interface Attempt {
  readonly email: string
  readonly address: string
  readonly nowMs: number
}

const accountKey = (email: string) => `account:${hashToken(email.toLowerCase())}`
const addressKey = (address: string) => `address:${hashToken(networkOf(address))}`

interface Limits {
  readonly keys: readonly (readonly [key: string, limit: number])[]
  readonly windowMs: number
  readonly nowMs: number
  readonly words: (waitMin: number) => string
}

/** Counts one attempt against each key, or throws `limited` and counts nothing. */
const admit = (db: Connection, { keys, windowMs, nowMs, words }: Limits): Promise<readonly number[]> =>
  db.transaction().execute(async (trx) => {
    for (const [key, limit] of keys) {
      const { count, oldestMs } = await countAttempts(trx, key, nowMs - windowMs)
      if (count < limit) continue
      const waitMin = Math.max(1, Math.ceil(((oldestMs ?? nowMs) + windowMs - nowMs) / 60_000))
      throw new AppError('limited', words(waitMin), { retryAfterS: waitMin * 60 })
    }
    return addAttempts(
      trx,
      keys.map(([key]) => key),
      nowMs,
    )
  })

/** Lets a sign-in be tried, or throws `limited`. Answers what `admitted` needs when the password was right. */
export const admitSignIn = (db: Connection, { email, address, nowMs }: Attempt): Promise<readonly number[]> =>
  admit(db, {
    keys: [
      [accountKey(email), ATTEMPTS_PER_ACCOUNT],
      [addressKey(address), ATTEMPTS_PER_ADDRESS],
    ],
    windowMs: ATTEMPT_WINDOW_MS,
    nowMs,
    words: (waitMin) => `Too many failed attempts. Wait ${waitMin} min, or reset your password.`,
  })

/** A right password: the account's failures are forgotten, and this attempt no longer counts against the address. */
export async function admitted(db: Connection, email: string, attemptIds: readonly number[]): Promise<void> {
  await deleteAttempts(db, attemptIds)
  await clearAttempts(db, accountKey(email))
}

/** Lets a letter be asked for, or throws `limited`; whether the address is known makes no difference. */
export const admitMail = (db: Connection, { email, address, nowMs }: Attempt): Promise<readonly number[]> =>
  admit(db, {
    keys: [
      [`mail:${accountKey(email)}`, MAILS_PER_ACCOUNT],
      [`mail:${addressKey(address)}`, MAILS_PER_ADDRESS],
    ],
    windowMs: MAIL_WINDOW_MS,
    nowMs,
    words: (waitMin) => `Too many letters were asked for. The ones that were sent still hold. Wait ${waitMin} min to ask for another.`,
  })
