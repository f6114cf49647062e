/** Limits on failed sign-ins, per account and per address, kept in the database as hashes so that a restart forgets nothing. */
import { addAttempts, clearAttempts, type Connection, countAttempts } from '#db/queries/account.ts'
import { hashToken } from '#lib/auth/kysely-adapter.server.ts'
import { AppError } from '#lib/http/app-error.ts'

/** Guessing: 10 in 15 minutes is 960 a day against a 12-character password; a household behind one address gets 30. */
export const ATTEMPT_WINDOW_MS = 15 * 60_000
export const ATTEMPTS_PER_ACCOUNT = 10
export const ATTEMPTS_PER_ADDRESS = 30

export interface Attempt {
  readonly email: string
  readonly address: string
  readonly nowMs: number
}

const accountKey = (email: string) => `account:${hashToken(email.toLowerCase())}`
const addressKey = (address: string) => `address:${hashToken(address)}`

/** Throws `limited` when the account or the address has failed too often lately. */
export async function checkAttempts(db: Connection, { email, address, nowMs }: Attempt): Promise<void> {
  const limits = [
    [accountKey(email), ATTEMPTS_PER_ACCOUNT],
    [addressKey(address), ATTEMPTS_PER_ADDRESS],
  ] as const
  for (const [key, limit] of limits) {
    const { count, oldestMs } = await countAttempts(db, key, nowMs - ATTEMPT_WINDOW_MS)
    if (count < limit) continue
    const waitMin = Math.max(1, Math.ceil(((oldestMs ?? nowMs) + ATTEMPT_WINDOW_MS - nowMs) / 60_000))
    throw new AppError('limited', `Too many failed attempts. Wait ${waitMin} min, or reset your password.`, { retryAfterS: waitMin * 60 })
  }
}

export const noteFailure = (db: Connection, { email, address, nowMs }: Attempt) =>
  addAttempts(db, [accountKey(email), addressKey(address)], nowMs)
export const forgetFailures = (db: Connection, email: string) => clearAttempts(db, accountKey(email))
