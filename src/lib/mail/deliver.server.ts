/**
 * Delivers the outbox: at most once a letter. `sending` is committed before the SMTP dialogue and `sent` after it; a worker
 * that dies in between leaves `sending`, which the next one turns into `ambiguous`. A refusal for now (4xx, no connection)
 * is tried again later; a refusal for good (5xx) is `failed`, of the address itself `bounced`, after which that address gets no
 * more. What is out of date is not sent. One worker delivers at a time, by a lease.
 */
import type { Kysely } from 'kysely'
import { changeLease, findLease, takeLease } from '#db/queries/job.ts'
import {
  claimDueLetter,
  type Delivery,
  type DueLetter,
  hasWork,
  markExpired,
  markInterrupted,
  type Refusal,
  settleLetter,
} from '#db/queries/outbox.ts'
import type { Database } from '#db/schema.ts'
import { holderIsGone } from '#lib/jobs/holder.server.ts'
import { log } from '#lib/log.server.ts'
import { unseal } from './seal.server.ts'
import { LETTER_DEADLINE_MS, type Transport } from './transport.server.ts'

/** Six tries over about half a day: pauses of 1, 5, 25, 125 and 625 minutes. */
export const MAX_ATTEMPTS = 6
const FIRST_RETRY_MS = 60_000
const RETRY_GROWTH = 5

const OUTBOX_LEASE = { job: 'mail', scope: 'outbox', period: 'one at a time' } as const
/** Renewed before each letter, so it outlasts one dialogue and a pause of the process. */
const LEASE_MS = LETTER_DEADLINE_MS + 180_000

export interface DeliverOptions {
  readonly db: Kysely<Database>
  readonly transport: Transport
  readonly holder: string
  readonly now: () => number
  /** Stops after this many letters, so that a round stays short. */
  readonly limit: number
}
export interface DeliverCounts {
  readonly sent: number
  readonly retried: number
  readonly failed: number
  readonly bounced: number
  readonly ambiguous: number
  readonly suppressed: number
  readonly expired: number
}

const NOTHING: DeliverCounts = { sent: 0, retried: 0, failed: 0, bounced: 0, ambiguous: 0, suppressed: 0, expired: 0 }

/** One round: what is due now, at most `limit` letters. Answers zeros when another worker is delivering. */
export async function deliverMail(options: DeliverOptions): Promise<DeliverCounts> {
  const { db, transport, holder, now, limit } = options
  if (!(await hasWork(db, now()))) return NOTHING
  const left = await takeOutbox(db, holder, now())
  if (left === null) return NOTHING
  const counts = { ...NOTHING, ...left }
  try {
    for (let letters = 0; letters < limit; letters++) {
      if (!(await changeLease(db, { ...OUTBOX_LEASE, heldBy: holder }, { leaseUntilMs: now() + LEASE_MS }))) break
      const claim = await claimDueLetter(db, now())
      if (!claim) break
      if (claim.kind === 'suppressed') {
        counts.suppressed += 1
        continue
      }
      const delivery = await attempt(claim.letter, transport, now)
      await settleLetter(db, claim.letter, delivery)
      counts[COUNTED_AS[delivery.state]] += 1
    }
  } finally {
    await changeLease(db, { ...OUTBOX_LEASE, heldBy: holder }, { leaseUntilMs: 0 })
  }
  if (Object.values(counts).some((count) => count > 0)) log.info({ job: 'mail', counts }, 'post delivered')
  return counts
}

/** The letters found interrupted and out of date, or `null` while somebody else delivers. */
const takeOutbox = (db: Kysely<Database>, holder: string, nowMs: number): Promise<Pick<DeliverCounts, 'ambiguous' | 'expired'> | null> =>
  db.transaction().execute(async (trx) => {
    const lease = await findLease(trx, OUTBOX_LEASE)
    if (lease && lease.leaseUntilMs > nowMs && !holderIsGone(lease.holder)) return null
    await takeLease(trx, OUTBOX_LEASE, { organisationId: null, holder, leaseUntilMs: nowMs + LEASE_MS })
    return { ambiguous: await markInterrupted(trx), expired: await markExpired(trx, nowMs) }
  })

type AttemptState = 'sent' | 'queued' | 'failed' | 'bounced' | 'ambiguous'
const COUNTED_AS: Readonly<Record<AttemptState, keyof DeliverCounts>> = {
  sent: 'sent',
  queued: 'retried',
  failed: 'failed',
  bounced: 'bounced',
  ambiguous: 'ambiguous',
}

type Attempt = Delivery & { readonly state: AttemptState; readonly suppress?: Refusal | null }

async function attempt(letter: DueLetter, transport: Transport, now: () => number): Promise<Attempt> {
  const outcome = await transport.send(unseal(letter, letter.privateParts))
  const nowMs = now()
  const ended = { sentAtMs: null, nextAttemptAtMs: nowMs }
  switch (outcome.kind) {
    case 'sent':
      return { ...ended, state: 'sent', error: null, sentAtMs: nowMs }
    case 'unknown':
      return { ...ended, state: 'ambiguous', error: outcome.reason }
    case 'refused':
      return { ...ended, state: 'failed', error: outcome.reason }
    case 'bounced':
      return {
        ...ended,
        state: 'bounced',
        error: outcome.reason,
        suppress: outcome.forGood ? { detail: outcome.reason, atMs: nowMs } : null,
      }
    case 'try-later':
      return letter.attempts >= MAX_ATTEMPTS
        ? { ...ended, state: 'failed', error: `Given up after ${letter.attempts} tries. ${outcome.reason}` }
        : {
            ...ended,
            state: 'queued',
            error: outcome.reason,
            nextAttemptAtMs: nowMs + FIRST_RETRY_MS * RETRY_GROWTH ** (letter.attempts - 1),
          }
  }
}
