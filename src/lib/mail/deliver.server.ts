/**
 * Delivers the outbox: at most once a letter. `sending` is committed before the SMTP dialogue and `sent` after it; a worker
 * that dies in between leaves `sending`, which the next start turns into `ambiguous`. A refusal for now (4xx, no
 * connection) is tried again later; a refusal for good (5xx) is `failed`.
 */
import type { Kysely } from 'kysely'
import { claimDueLetter, type DueLetter, type Delivery, markInterrupted, settleLetter } from '#db/queries/mail.ts'
import type { Database } from '#db/schema.ts'
import type { Transport } from './transport.server.ts'

/** Five tries over about a day: 1, 5, 25 and 125 minutes, then 10 hours. */
const MAX_ATTEMPTS = 6
const FIRST_RETRY_MS = 60_000
const RETRY_GROWTH = 5

export interface DeliverOptions {
  readonly db: Kysely<Database>
  readonly transport: Transport
  readonly now: () => number
  /** Stops after this many letters, so that a tick stays short. */
  readonly limit: number
}
export interface DeliverCounts {
  readonly sent: number
  readonly retried: number
  readonly failed: number
  readonly ambiguous: number
}

export async function deliverMail({ db, transport, now, limit }: DeliverOptions): Promise<DeliverCounts> {
  const counts = { sent: 0, retried: 0, failed: 0, ambiguous: 0 }
  for (let letters = 0; letters < limit; letters++) {
    const letter = await claimDueLetter(db, now())
    if (!letter) break
    const delivery = await attempt(letter, transport, now())
    await settleLetter(db, letter, delivery)
    counts[
      delivery.state === 'queued' ? 'retried' : delivery.state === 'sent' ? 'sent' : delivery.state === 'ambiguous' ? 'ambiguous' : 'failed'
    ] += 1
  }
  return counts
}

/** Run once when a worker starts, while no other worker sends. */
export const settleInterrupted = (db: Kysely<Database>): Promise<number> => markInterrupted(db)

async function attempt(letter: DueLetter, transport: Transport, nowMs: number): Promise<Delivery> {
  const outcome = await transport(letter)
  switch (outcome.kind) {
    case 'sent':
      return { state: 'sent', error: null, sentAtMs: nowMs, nextAttemptAtMs: nowMs }
    case 'unknown':
      return { state: 'ambiguous', error: outcome.reason, sentAtMs: null, nextAttemptAtMs: nowMs }
    case 'refused':
      return { state: 'failed', error: outcome.reason, sentAtMs: null, nextAttemptAtMs: nowMs }
    case 'try-later': {
      if (letter.attempts >= MAX_ATTEMPTS)
        return {
          state: 'failed',
          error: `Given up after ${letter.attempts} tries: ${outcome.reason}`,
          sentAtMs: null,
          nextAttemptAtMs: nowMs,
        }
      return {
        state: 'queued',
        error: outcome.reason,
        sentAtMs: null,
        nextAttemptAtMs: nowMs + FIRST_RETRY_MS * RETRY_GROWTH ** (letter.attempts - 1),
      }
    }
  }
}
